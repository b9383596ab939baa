import { describe, expect, it } from 'vitest';
import { runCommand } from '$scheduler/cli/run-command';
import { plainBlock } from '../empty-parts';
import { findFaults } from '../find-faults';
import { createPatternDraft, patternNames } from '../patterns';
import { protocolDraftSchema, type ProtocolDraft } from '../protocol-draft';
import { readContent } from '../read-content';
import { applyRepair } from './apply-repair';
import { checkDraft } from './check-draft';

const worked = ['yoked-region', 'gradual-abrupt', 'keep-transfer'] as const;

describe('checkDraft', () => {
	it.each(patternNames)('finds nothing in the pattern %s', (name) => {
		expect(checkDraft(createPatternDraft(name))).toEqual([]);
	});

	it.each(worked)('lets the pattern %s be frozen as it opens', (name) => {
		const draft = createPatternDraft(name);
		expect(findFaults(draft, [])).toEqual([]);
		expect(readContent(draft)).toMatchObject({ ok: true });
	});
});

describe('one protocol on the page and on the command line', () => {
	const faulty: [string, (draft: ProtocolDraft) => void][] = [
		['as the pattern opens', () => undefined],
		[
			'with other trials and rest in an arm',
			({ visits }) => {
				const day = visits[1];
				if (day)
					day.armBlocks = { fixed: [{ ...plainBlock('practice', 100), restAfterMinutes: 9 }] };
			}
		],
		[
			'with an early retention that is shown',
			({ visits }) => {
				const last = visits.at(-1);
				if (last) Object.assign(last.gapBefore, { minHours: 10 });
				for (const block of last?.blocks ?? []) block.feedback = 'shown';
			}
		],
		['with a loose dead band', (draft) => (draft.otherPolicy = { band: { q1: 0.5 } })],
		['with a gap that no week keeps', ({ booking }) => (booking.pauses.count = 0)],
		['with a justified finding', (draft) => (draft.justifications = { burden: 'A pilot.' })]
	];

	it.each(faulty)('gets the same verdicts %s', (_what, change) => {
		const draft = createPatternDraft('yoked-region');
		change(draft);
		const read = readContent(draft);
		if (!read.ok) throw new Error(JSON.stringify(read.faults));
		const asked = runCommand(['check-design'], () => JSON.stringify(read.content));
		const { findings } = JSON.parse(asked.stdout) as { findings: { text: string }[] };
		const page = checkDraft(draft);
		expect(findings.map(({ text }) => text)).toEqual(page.map(({ text }) => text));
		expect(findings.map((found) => ({ ...found, repair: null, justification: null }))).toEqual(
			page.map((found) => ({ ...found, repair: null, justification: null }))
		);
	});
});

describe('applyRepair', () => {
	it('takes each finding out of the draft that it stands in', () => {
		const draft = createPatternDraft('yoked-region');
		const [, day1, day2] = draft.visits;
		if (!day1 || !day2) throw new Error('the pattern has days');
		day1.armBlocks = { fixed: [{ ...plainBlock('practice', 100), restAfterMinutes: 9 }] };
		day2.gapBefore = { ...day2.gapBefore, nightsBetween: 4 };
		Object.assign(draft.visits.at(-1)?.gapBefore ?? {}, { minHours: 3 });
		draft.visits.at(-1)?.blocks.forEach((block) => (block.feedback = 'shown'));
		draft.otherPolicy = { band: { q1: 0.5, q2: 0.6 } };
		const findings = checkDraft(draft);
		expect(new Set(findings.map(({ code }) => code)).size).toBeGreaterThan(4);
		for (const { key, repair } of findings) {
			if (!repair) throw new Error(`${key} has no repair`);
			const mended = protocolDraftSchema.parse(applyRepair(draft, repair));
			expect(checkDraft(mended).map((found) => found.key)).not.toContain(key);
		}
	});

	it('writes clock times as the form does and leaves the draft it was given alone', () => {
		const draft = createPatternDraft('blank');
		const operation = {
			kind: 'set-value',
			path: ['booking', 'earliestMinute'],
			value: 450
		} as const;
		expect(applyRepair(draft, { label: '', operations: [operation] }).booking.earliest).toBe(
			'07:30'
		);
		expect(draft.booking.earliest).toBe('08:00');
	});
});
