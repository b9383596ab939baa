import { describe, expect, it } from 'vitest';
import { findFaults } from '../find-faults';
import { createPatternDraft } from '../patterns';
import { setPolicyValue } from '../policy/policy-values';
import type { ProtocolDraft } from '../protocol-draft';
import { findUnsavable } from './find-envelope-faults';

const rigs = [
	{
		...{ name: 'Gull', minutesPerVisit: 90, trialsPerVisit: 400 },
		...{ variableMax: { release_speed: 3 }, shiftMax: 0.4, penaltyShareMax: 0.8 }
	},
	{
		...{ name: 'Heron', minutesPerVisit: 60, trialsPerVisit: 300 },
		...{ variableMax: { release_speed: 3.5 }, shiftMax: 0.3, penaltyShareMax: 0.7 }
	}
];

function draftWith(limits: Partial<ProtocolDraft['limits']>): ProtocolDraft {
	const draft = createPatternDraft('two-arms');
	Object.assign(draft.limits, limits);
	return draft;
}

const refused = (limits: Partial<ProtocolDraft['limits']>) =>
	findUnsavable(draftWith(limits), rigs).map(({ code, field }) => [code, field]);

describe('a limit of the protocol', () => {
	it.each<[string, Partial<ProtocolDraft['limits']>]>([
		['limits.minutesPerVisit', { minutesPerVisit: 91 }],
		['limits.trialsPerVisit', { trialsPerVisit: 401 }],
		['limits.shiftMax', { shiftMax: 0.41 }],
		['limits.penaltyShareMax', { penaltyShareMax: 0.81 }],
		['limits.variableMax.release_speed', { variableMax: { release_speed: 3.51 } }]
	])('above what every rig allows is refused at %s', (field, limits) => {
		expect(refused(limits)).toEqual([['over-rig-limit', field]]);
		const [fault] = findUnsavable(draftWith(limits), rigs);
		expect(fault?.text).toContain('Gull');
		expect(fault?.remedy).toMatch(/^Enter at most/);
	});

	it.each<[string, Partial<ProtocolDraft['limits']>]>([
		['limits.minutesPerVisit', { minutesPerVisit: 601 }],
		['limits.minutesPerVisit', { minutesPerVisit: 30.5 }],
		['limits.trialsPerVisit', { trialsPerVisit: 0 }],
		['limits.shiftMax', { shiftMax: -1 }],
		['limits.penaltyShareMax', { penaltyShareMax: 1.2 }],
		['limits.variableMax.release_speed', { variableMax: { release_speed: 0 } }]
	])('out of its range is refused at %s, rigs or none', (field, limits) => {
		const faults = findUnsavable(draftWith(limits), []);
		expect(faults.map((fault) => fault.field)).toEqual([field]);
	});

	it('at what the widest rig allows is kept', () => {
		expect(
			refused({ minutesPerVisit: 90, shiftMax: 0.4, variableMax: { release_speed: 3.5 } })
		).toEqual([]);
	});

	it('that one of the rigs does not state is not bound by the others', () => {
		const open = [...rigs, { name: 'Ibis', minutesPerVisit: 60, trialsPerVisit: 300 }];
		expect(findUnsavable(draftWith({ shiftMax: 5 }), open)).toEqual([]);
	});

	it('may be missing while the draft is written, and is asked for before freezing', () => {
		expect(refused({ minutesPerVisit: null })).toEqual([]);
		const codes = findFaults(draftWith({ minutesPerVisit: null }), rigs).map(({ code }) => code);
		expect(codes).toContain('number-missing');
	});

	it('of recorded data is no matter of the rigs', () => {
		const draft = createPatternDraft('single-visit');
		expect(findUnsavable(draft, rigs)).toEqual([]);
	});
});

describe('a design that could exceed its limits', () => {
	const codes = (draft: ProtocolDraft) =>
		findFaults(draft, [])
			.filter(({ level }) => level === 'fault')
			.map(({ code, field }) => [code, field]);

	it.each<[string, string, number, (draft: ProtocolDraft) => void]>([
		[
			...(['over-shift', 'visits.1.blocks.0', 1] as const),
			(draft) => {
				draft.limits.shiftMax = 0.2;
				Object.assign(draft.visits[1]?.blocks[0] ?? {}, { shift: { from: 0, to: -0.21 } });
			}
		],
		[
			...(['over-variable', 'visits.1.blocks.0', 1] as const),
			(draft) => {
				draft.limits.variableMax = { release_speed: 3 };
				const region = { center: [2.5, 0], halfWidth: [0.6, 0.1] };
				Object.assign(draft.visits[1]?.blocks[0] ?? {}, { region });
			}
		],
		[
			...(['over-penalty', 'policy.place.shares', 1] as const),
			(draft) => (draft.limits.penaltyShareMax = 0.7)
		],
		[
			...(['target-over-limit', 'limits.variableMax.release_speed', 1] as const),
			(draft) => (draft.limits.variableMax = { release_speed: 1 })
		]
	])('is named %s at %s', (code, field, count, change) => {
		const draft = createPatternDraft('two-arms');
		change(draft);
		const found = codes(draft).filter(([name]) => name === code);
		expect(found).toEqual([[code, field]]);
		expect(found.length).toBe(count);
	});

	it('is let pass at the limit itself', () => {
		const draft = createPatternDraft('two-arms');
		Object.assign(draft.limits, { shiftMax: 0.2, penaltyShareMax: 0.8 });
		draft.limits.variableMax = { release_speed: 3.1 };
		const region = { center: [2.5, 0], halfWidth: [0.6, 0.1] };
		Object.assign(draft.visits[1]?.blocks[0] ?? {}, { region, shift: { from: 0, to: -0.2 } });
		const over = codes(draft).filter(([code]) => /^over|^target/.test(code ?? ''));
		expect(over).toEqual([]);
	});

	it('is mended by taking out the hardest shares', () => {
		const draft = createPatternDraft('two-arms');
		draft.limits.penaltyShareMax = 0.7;
		setPolicyValue(draft, 'place.shares', [0.7, 0.6, 0.5]);
		expect(codes(draft).filter(([code]) => code === 'over-penalty')).toEqual([]);
	});
});
