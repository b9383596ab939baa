import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createFullContent } from '../../../tests/support/full-protocol';
import { listChangedLeaves, listDifferences } from './list-differences';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { readLeaves } from './read-leaves';

const content = createFullContent();
const leafPaths = [...readLeaves(content).keys()];
const [all, blinded] = [{ withRule: true }, { withRule: false }];

type Json = Record<string, unknown>;

/** The place in a copy of a document that a path of `readLeaves` names. */
function locate(root: unknown, path: string): { holder: Json; key: string } {
	const steps = path.split('.');
	let holder = root as Json;
	const toKey = (at: unknown, step: string) =>
		Array.isArray(at) ? String(Number(step) - 1) : step;
	for (const step of steps.slice(0, -1)) holder = holder[toKey(holder, step)] as Json;
	return { holder, key: toKey(holder, steps.at(-1) ?? '') };
}

function withValue(from: ProtocolContent, path: string, value: unknown): ProtocolContent {
	const copy = structuredClone(from);
	const { holder, key } = locate(copy, path);
	holder[key] = value;
	return copy;
}

function valueAt(from: ProtocolContent, path: string): unknown {
	const { holder, key } = locate(from, path);
	return holder[key];
}

/** Another value of the same kind, so close that a rounding text would hide it. */
function change(value: unknown): unknown {
	if (typeof value === 'number') return value + 0.00037;
	if (typeof value === 'boolean') return !value;
	if (Array.isArray(value)) return ['something'];
	return typeof value === 'string' ? `${value}x` : 'something';
}

const changedSet = fc.uniqueArray(fc.constantFrom(...leafPaths), { minLength: 1, maxLength: 8 });

describe('the difference of two versions', () => {
	it('is empty for equal documents', () => {
		expect(listDifferences(content, structuredClone(content), all)).toEqual([]);
	});

	it.each(leafPaths)('names a change of %s alone', (path) => {
		const after = withValue(content, path, change(valueAt(content, path)));
		const found = listDifferences(content, after, all);
		expect(found.flatMap(({ paths }) => paths)).toContain(path);
	});

	it('names every changed value, and shows each so that its return would show', () => {
		fc.assert(
			fc.property(changedSet, (paths) => {
				let after = content;
				for (const path of paths) after = withValue(after, path, change(valueAt(content, path)));
				const found = listDifferences(content, after, all);
				const named = new Set(found.flatMap((entry) => entry.paths));
				expect([...named].sort()).toEqual(listChangedLeaves(content, after).sort());
				for (const path of paths) expectShown(path, after);
			}),
			{ numRuns: 20 }
		);
	}, 30_000);

	/** Undoing one value alone changes or removes the entry that names it. */
	function expectShown(path: string, after: ProtocolContent) {
		const listOf = (one: ProtocolContent) =>
			listDifferences(content, one, all).map((found) => [found, JSON.stringify(found)] as const);
		const later = new Set(
			listOf(withValue(after, path, valueAt(content, path))).map(([, text]) => text)
		);
		const shown = listOf(after).filter(([{ paths }]) => paths.includes(path));
		expect(shown.length).toBeGreaterThan(0);
		expect(shown.some(([, text]) => !later.has(text))).toBe(true);
	}

	it('shows a value that has no words by its path with both values', () => {
		const policy = { ...content.policy, probeEvery: 9 };
		expect(listDifferences(content, { ...content, policy }, all)).toEqual([
			{
				key: 'policy.probeEvery',
				place: 'policy, probe every',
				before: '6',
				after: '9',
				paths: ['policy.probeEvery']
			}
		]);
	});

	it('shows a field that this text knows nothing of', () => {
		const after = { ...content, unknown: { part: 'said' } };
		expect(listDifferences(content, after as ProtocolContent, all)).toMatchObject([
			{ place: 'unknown, part', before: null, after: 'said' }
		]);
	});

	it('shows a change of percentages finer than one in a hundred', () => {
		const guardRails = { ...content.guardRails, automaticCoverMax: 0.504 };
		expect(listDifferences(content, { ...content, guardRails }, all)).toMatchObject([
			{ before: expect.stringContaining('50 %'), after: expect.stringContaining('50.4 %') }
		]);
	});

	it('says a new name of a visit with the old one', () => {
		const after = withValue(content, 'visits.3.label', 'Second day');
		expect(listDifferences(content, after, all)).toMatchObject([
			{
				place: 'Visits, Second day',
				before: expect.stringMatching(/^Day 2: practice/),
				after: expect.stringMatching(/^Second day: practice/)
			}
		]);
	});

	it('shows nothing of the rule, nor of unknown fields, to who may not read it', () => {
		const hidden = leafPaths.filter((path) =>
			/^(policy|guardRails|yoking|justifications|instructions)|armBlocks|(shift|penaltyShare|variable)Max/.test(
				path
			)
		);
		expect(hidden.length).toBeGreaterThan(50);
		const secret = { ...content, ladder: [{ level: 12.5 }] };
		let after: ProtocolContent = secret;
		for (const path of hidden) after = withValue(after, path, change(valueAt(content, path)));
		expect(listDifferences(content, after, blinded)).toEqual([]);
	});
});
