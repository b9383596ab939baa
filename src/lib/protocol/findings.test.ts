import { describe, expect, it } from 'vitest';
import { applyRepair } from './edit/apply-repair';
import { plainBlock } from './empty-parts';
import { checkWhole, findFreezeFaults } from './findings';
import { createPatternDraft } from './patterns';
import type { ProtocolDraft } from './protocol-draft';

const rigs = [{ name: 'Gull', minutesPerVisit: 90, trialsPerVisit: 400 }];

function draftWith(change: (draft: ProtocolDraft) => void = () => {}): ProtocolDraft {
	const draft = createPatternDraft('two-arms');
	Object.assign(draft.comparison, { effectD: 0.8, effectSource: 'pilot', peoplePerArm: 30 });
	change(draft);
	return draft;
}

const soonRetention = () =>
	draftWith(({ visits }) => Object.assign(visits[7]?.gapBefore ?? {}, { minHours: 20 }));

const justify = (draft: ProtocolDraft, key: string, why: string): ProtocolDraft => ({
	...draft,
	justifications: { ...draft.justifications, [key]: why }
});

const codesOf = (draft: ProtocolDraft) => findFreezeFaults(draft, rigs).map(({ code }) => code);

describe('what keeps a draft from being frozen', () => {
	it('is nothing in the two-arm pattern once its comparison is filled in', () => {
		expect(findFreezeFaults(draftWith(), rigs)).toEqual([]);
	});

	it.each<[string, (draft: ProtocolDraft) => void]>([
		[
			'retention-early',
			({ visits }) => Object.assign(visits[7]?.gapBefore ?? {}, { minHours: 20 })
		],
		['impossible-gap', ({ booking }) => (booking.pauses.count = 0)],
		[
			'impossible-gap',
			({ visits }) => Object.assign(visits[3]?.gapBefore ?? {}, { nightsBetween: 9 })
		]
	])('is a finding, %s, with its remedy in words', (code, change) => {
		const [found, ...others] = findFreezeFaults(draftWith(change), rigs);
		expect(others).toEqual([]);
		expect(found).toMatchObject({ code, level: 'fault' });
		expect(found?.remedy).toMatch(/say why it stays\.$/);
	});

	it('is open until it is mended', () => {
		const draft = soonRetention();
		const [finding] = checkWhole(draft, rigs).findings;
		expect(finding?.number).toBe(1);
		if (!finding?.repair) return expect.unreachable();
		expect(codesOf(applyRepair(draft, finding.repair))).toEqual([]);
	});

	it('is open until somebody says in writing why it stays', () => {
		const draft = soonRetention();
		const key = checkWhole(draft, rigs).findings[0]?.key ?? '';
		expect(codesOf(justify(draft, key, '   '))).toEqual(['retention-early']);
		const justified = justify(draft, key, 'The question is about a night of rest.');
		expect(codesOf(justified)).toEqual([]);
		const [finding] = checkWhole(justified, rigs).findings;
		expect(finding).toMatchObject({
			number: null,
			why: 'The question is about a night of rest.'
		});
		expect(codesOf(justify(justified, key, ''))).toEqual(['retention-early']);
	});

	it('is a limit that is exceeded, whatever reason is given', () => {
		const draft = draftWith(({ limits }) => (limits.minutesPerVisit = 45));
		const { findings, faults, toMendCount } = checkWhole(draft, rigs);
		expect(faults).toEqual([]);
		expect(toMendCount).toBe(findings.length);
		const reasoned = findings.reduce((next, { key }) => justify(next, key, 'We want it.'), draft);
		expect(codesOf(reasoned)).toEqual(findings.map(() => 'burden'));
		expect(findings.length).toBeGreaterThan(0);
	});

	it('is a list that would show the arm to operators who are blinded', () => {
		const longer = draftWith(({ visits }) => {
			const [, day] = visits;
			if (day) day.armBlocks.fixed = [...day.blocks, plainBlock('practice', 20)];
		});
		const { findings, marks } = checkWhole(longer, rigs);
		expect(findings.map(({ code, bar }) => [code, bar?.code])).toEqual([
			['unequal-trials', 'blocks-tell-arm']
		]);
		expect(findings[0]?.bar?.text).toBe(
			'Adaptive has 4 blocks of 60 trials, Fixed 5 blocks of 60, 60, 60, 60, 20 trials: the operator, who is blinded, would see the arm.'
		);
		expect(marks).toEqual([{ number: 1, place: { visit: 2 } }]);
		const reasoned = justify(longer, findings[0]?.key ?? '', 'It is short.');
		expect(codesOf(reasoned)).toEqual(['unequal-trials']);
		const open = { ...reasoned, variants: ['open-operator'] };
		expect(codesOf(open)).toEqual([]);
	});

	it('is the same number of trials in other blocks, where operators are blinded', () => {
		const split = draftWith(({ visits }) => {
			const [, day] = visits;
			if (day) day.armBlocks.fixed = [30, 90, 60, 60].map((n) => plainBlock('practice', n));
		});
		expect(codesOf(split)).toContain('blocks-tell-arm');
		split.variants = ['open-operator'];
		expect(codesOf(split)).not.toContain('blocks-tell-arm');
	});
});
