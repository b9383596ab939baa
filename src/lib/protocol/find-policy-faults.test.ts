import { describe, expect, it } from 'vitest';
import { findFaults } from './find-faults';
import { findPolicyFaults } from './find-policy-faults';
import { createPatternDraft } from './patterns';
import type { ProtocolDraft } from './protocol-draft';

function draftWith(otherPolicy: Record<string, unknown>, trials = 60): ProtocolDraft {
	const draft = createPatternDraft('two-arms');
	for (const block of draft.visits.flatMap(({ blocks }) => blocks)) block.trials = trials;
	return { ...draft, otherPolicy };
}

describe('findPolicyFaults', () => {
	it('finds nothing in the defaults of the two-arm pattern', () => {
		expect(findPolicyFaults(draftWith({}))).toEqual([]);
	});

	it.each<[string, 'fault' | 'caution', ProtocolDraft]>([
		['policy-first-step', 'fault', draftWith({ shift: { rule: { firstStepSd: 0.5 } } })],
		['policy-few-plain', 'caution', draftWith({ shift: { minPlain: 40 } })],
		['policy-little-leaks', 'caution', draftWith({ place: { leakMin: 0.02 } })],
		['policy-share-hard', 'caution', draftWith({ place: { shares: [0.9, 0.5] } })],
		['policy-washout-short', 'caution', draftWith({}, 40)],
		[
			'policy-lengths-differ',
			'fault',
			draftWith({ obligations: [{ kind: 'probe', when: { at: 'day-end' }, trials: 20 }] })
		]
	])('says %s (%s) with a place, a sentence and a remedy', (code, level, draft) => {
		const found = findFaults(draft, []).find((fault) => fault.code === code);
		expect(found?.level).toBe(level);
		expect(found?.place).not.toBe('');
		expect(found?.text).toMatch(/\.$/);
		expect(found?.remedy).toMatch(/\.$/);
	});

	it('refuses a day that cannot hold one block', () => {
		const draft = draftWith({});
		draft.limits.trialsPerVisit = 50;
		expect(findPolicyFaults(draft).map(({ code, level }) => [code, level])).toEqual([
			['policy-day-short', 'fault']
		]);
	});

	it('says nothing of a policy that no arm follows', () => {
		const draft = draftWith({ shift: { minPlain: 40 } });
		for (const arm of draft.arms) arm.rule = 'fixed';
		expect(findPolicyFaults(draft)).toEqual([]);
	});
});
