import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { POLICY_DEFAULTS, policySettingsSchema } from '$scheduler/policies/policy-settings';
import { buildPolicy } from '../build-policy';
import { createPatternDraft } from '../patterns';
import { findDueBlockFaults } from './find-due-block-faults';
import { readDueBlocks, usualDueBlock, writeDueBlocks, type DueBlock } from './due-blocks';
import { findSettingFaults } from './find-setting-faults';
import { readNumberList } from './number-list';
import { policyFields, settingsElsewhere } from './policy-groups';
import {
	differsFromDefault,
	getPolicyDefault,
	getPolicyValue,
	setPolicyValue
} from './policy-values';

type Node = { properties?: Record<string, Node>; anyOf?: Node[] };

/** Paths of all single settings, as the engine's schema names them. */
function listPaths(node: Node, path: readonly string[] = []): string[] {
	const inner = node.properties;
	if (!inner) return [path.join('.')];
	return Object.entries(inner).flatMap(([name, child]) => listPaths(child, [...path, name]));
}

const known = listPaths(z.toJSONSchema(policySettingsSchema, { io: 'input' }) as Node);

describe('settings of the policy', () => {
	it('have a field each, or a form elsewhere', () => {
		const isElsewhere = (path: string) =>
			settingsElsewhere.some((other) => path === other || path.startsWith(`${other}.`));
		const fields = policyFields.map(({ path }) => path);
		expect(known.filter((path) => !isElsewhere(path)).sort()).toEqual([...fields].sort());
	});

	it('have defaults that lie inside the range of their field', () => {
		const draft = createPatternDraft('two-arms');
		for (const { path } of policyFields) {
			const value = getPolicyDefault(path);
			if (value !== undefined) setPolicyValue(draft, path, value);
		}
		expect(findSettingFaults(draft)).toEqual([]);
		expect(policyFields.filter((field) => differsFromDefault(draft, field))).toEqual([]);
	});

	it.each(policyFields.filter((field) => 'min' in field))(
		'takes both ends of the range of $path, and the engine too',
		(field) => {
			if (!('min' in field)) return expect.unreachable();
			for (const end of [field.min, field.max]) {
				const draft = createPatternDraft('two-arms');
				setPolicyValue(draft, field.path, field.kind === 'list' ? [end] : end);
				const faults = findSettingFaults(draft).filter(({ code }) => !code.endsWith('-order'));
				expect(faults).toEqual([]);
				expect(policySettingsSchema.safeParse(buildPolicy(draft)).error?.issues).toBeUndefined();
			}
		}
	);

	it.each(policyFields.filter((field) => 'min' in field))(
		'names a number beyond the range of $path at its field',
		(field) => {
			if (!('min' in field)) return expect.unreachable();
			const draft = createPatternDraft('two-arms');
			const beyond = field.max + 1;
			setPolicyValue(draft, field.path, field.kind === 'list' ? [beyond] : beyond);
			const [fault] = findSettingFaults(draft);
			expect(fault).toMatchObject({ code: 'number-outside', field: `policy.${field.path}` });
		}
	);

	it('are the product defaults again once taken away', () => {
		const draft = createPatternDraft('two-arms');
		setPolicyValue(draft, 'shift.rule.stepSd', 0.3);
		expect(policySettingsSchema.parse(buildPolicy(draft)).shift.rule.stepSd).toBe(0.3);
		expect(differsFromDefault(draft, { path: 'shift.rule.stepSd' })).toBe(true);
		setPolicyValue(draft, 'shift.rule.stepSd', undefined);
		expect(draft.otherPolicy).toEqual({});
		expect(getPolicyValue(draft, 'shift.rule.stepSd')).toBeUndefined();
		expect(policySettingsSchema.parse(buildPolicy(draft)).shift).toEqual(POLICY_DEFAULTS.shift);
	});

	it('name pairs that stand in the wrong order', () => {
		const draft = createPatternDraft('two-arms');
		setPolicyValue(draft, 'place.reachMinSd', 5);
		expect(findSettingFaults(draft).map(({ code }) => code)).toEqual(['reach-order']);
	});

	it('keep a list that cannot be read yet, and say so', () => {
		const draft = createPatternDraft('two-arms');
		setPolicyValue(draft, 'lean', '0.25 x');
		expect(findSettingFaults(draft).map(({ code }) => code)).toEqual(['list-unreadable']);
	});
});

describe('readNumberList', () => {
	it.each([
		['0.8, 0.7;0.6  0.5', [0.8, 0.7, 0.6, 0.5]],
		['', []],
		['−1 2', [-1, 2]],
		['0.8 a', null]
	])('reads “%s”', (text, numbers) => {
		expect(readNumberList(text)).toEqual(numbers);
	});
});

describe('due blocks', () => {
	const rows: DueBlock[] = [
		usualDueBlock,
		{ ...usualDueBlock, kind: 'clamp', at: 'day-end', days: [3, 7], feedback: 'clamped-to-noise' },
		{ ...usualDueBlock, kind: 'washout', at: 'after', ended: 'shift' },
		{ ...usualDueBlock, kind: 'transfer', at: 'every', perturbedBlocks: 5, targetOffset: 0.2 }
	];

	function draftWith(list: readonly DueBlock[]) {
		const draft = createPatternDraft('two-arms');
		writeDueBlocks(draft, list);
		return draft;
	}

	it('become the engine’s obligations', () => {
		const { obligations } = policySettingsSchema.parse(buildPolicy(draftWith(rows)));
		expect(obligations).toEqual([
			{ kind: 'probe', when: { at: 'day-start', days: null, gapHoursMin: 0 } },
			{ kind: 'clamp', when: { at: 'day-end', days: [3, 7] }, feedback: 'clamped-to-noise' },
			{ kind: 'washout', when: { at: 'after', ended: 'shift' } },
			{ kind: 'transfer', when: { at: 'every', perturbedBlocks: 5 }, targetOffset: 0.2 }
		]);
	});

	it('come back as the rows that were written', () => {
		const draft = draftWith(rows);
		expect(findDueBlockFaults(draft)).toEqual([]);
		const again = draftWith(readDueBlocks(draft));
		expect(again.otherPolicy).toEqual(draft.otherPolicy);
	});

	it('leave no trace once the last row is gone', () => {
		expect(draftWith([]).otherPolicy).toEqual({});
	});

	it.each<[string, Partial<DueBlock>]>([
		['days-without-time', { days: [1] }],
		['days-without-time', { days: [12] }],
		['days-unreadable', { days: '2 and 3' }],
		['clamp-feedback', { kind: 'clamp', feedback: 'shown' }],
		['transfer-offset', { kind: 'transfer', targetOffset: 0 }],
		['number-missing', { at: 'every', perturbedBlocks: null }]
	])('name %s', (code, change) => {
		const faults = findDueBlockFaults(draftWith([{ ...usualDueBlock, ...change }]));
		expect(faults.map((fault) => fault.code)).toEqual([code]);
		expect(faults[0]?.remedy).toMatch(/\.$/);
	});
});
