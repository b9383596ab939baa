import { describe, expect, it } from 'vitest';
import { createTaskDraft } from '../tasks/task-draft';
import { plainBlock } from './empty-parts';
import { findFaults } from './find-faults';
import { createPatternDraft } from './patterns';
import type { ProtocolDraft } from './protocol-draft';

const rigs = [
	{ name: 'Gull', minutesPerVisit: 90, trialsPerVisit: 400 },
	{ name: 'Heron', minutesPerVisit: 60, trialsPerVisit: 400 }
];

/** The two-arm pattern with its comparison filled in, then changed. */
function draftWith(change: (draft: ProtocolDraft) => void = () => {}): ProtocolDraft {
	const draft = createPatternDraft('two-arms');
	Object.assign(draft.comparison, { effectD: 0.8, effectSource: 'pilot', peoplePerArm: 30 });
	change(draft);
	return draft;
}

function blockingCodes(draft: ProtocolDraft): string[] {
	const faults = findFaults(draft, rigs).filter(({ level }) => level === 'fault');
	return faults.map(({ code }) => code);
}

describe('findFaults', () => {
	it('finds nothing to mend in the two-arm pattern once its comparison is filled in', () => {
		expect(findFaults(draftWith(), rigs)).toEqual([]);
	});

	it('asks for effect and people while the comparison is empty', () => {
		const faults = findFaults(createPatternDraft('two-arms'), rigs);
		expect(faults.map(({ field }) => field)).toEqual([
			'comparison.effectD',
			'comparison.peoplePerArm',
			'comparison.effectSource'
		]);
	});

	it('needs no comparison in a study of one arm', () => {
		const draft = createPatternDraft('blank');
		expect(blockingCodes(draft)).toEqual([]);
	});

	it.each<[string, (draft: ProtocolDraft) => void]>([
		['no-baseline', (draft) => draft.visits.shift()],
		['second-baseline', (draft) => Object.assign(draft.visits[3] ?? {}, { kind: 'baseline' })],
		['retention-early', (draft) => draft.visits.reverse()],
		['gap-order', (draft) => setGap(draft, 2, { minHours: 25 })],
		['adaptive-lengths', (draft) => setTrials(draft, 3, 1, 40)],
		['over-trials', (draft) => draft.visits[2]?.blocks.push(plainBlock('adaptive', 100))],
		['over-minutes', (draft) => (draft.limits.minutesPerVisit = 45)],
		['over-every-rig', (draft) => Object.assign(draft.visits[1] ?? {}, { minutes: 95 })],
		['no-block', (draft) => Object.assign(draft.visits[4] ?? {}, { blocks: [] })],
		[
			'adaptive-misplaced',
			(draft) => Object.assign(draft.visits[0]?.blocks[0] ?? {}, { purpose: 'adaptive' })
		],
		['no-aim', (draft) => (draft.aims.region.isOn = draft.aims.shift.isOn = false)],
		['lead-too-long', (draft) => (draft.readyLeadHours = 21)],
		['delay-too-long', (draft) => (draft.invitationDelayHours = 48)],
		['start-too-late', (draft) => Object.assign(draft.earliestStartHours, { max: 400 })],
		['clock-order', (draft) => (draft.booking.latest = '07:00')],
		['no-weekday', (draft) => (draft.booking.weekdays = [])],
		['arm-twice', (draft) => Object.assign(draft.arms[1] ?? {}, { name: 'Adaptive' })],
		['comparison-same-arm', (draft) => (draft.comparison.armB = 'adaptive')],
		['comparison-arms', (draft) => (draft.comparison.armB = 'gone')],
		['text-missing', (draft) => (draft.consentTextVersion = ' ')],
		['scale-missing', (draft) => setVariable(draft, 0, { scale: null })],
		['range-empty', (draft) => setVariable(draft, 0, { min: 9 })],
		['origin-outside', (draft) => setVariable(draft, 1, { origin: 5 })]
	])('names %s with a place and a remedy', (code, change) => {
		const found = findFaults(draftWith(change), rigs).find((fault) => fault.code === code);
		expect(found?.level).toBe('fault');
		expect(found?.place).not.toBe('');
		expect(found?.remedy).toMatch(/\.$/);
	});

	it('cautions, but does not refuse, what only one of two rigs may run', () => {
		const draft = draftWith(({ visits }) => Object.assign(visits[1] ?? {}, { minutes: 75 }));
		const [caution] = findFaults(draft, rigs);
		expect(caution).toMatchObject({ code: 'over-one-rig', level: 'caution', place: 'Day 1' });
		expect(caution?.text).toContain('Heron 60 min');
	});
});

const unitVariable = {
	unit: 'm',
	min: -1,
	max: 1,
	origin: 0,
	scale: 0.1,
	resolution: null,
	weight: null
};

describe('a visit too long for every rig', () => {
	it('is a caution where nothing is issued to a rig', () => {
		const draft = createPatternDraft('single-visit');
		draft.task = createTaskDraft('puck');
		draft.visits[0]?.blocks.push(plainBlock('baseline', 980));
		const found = findFaults(draft, rigs).map(({ code, level }) => [code, level]);
		expect(found).toEqual([['over-every-rig', 'caution']]);
	});
});

describe('a formula of one’s own', () => {
	function formulaDraft(formula: string): ProtocolDraft {
		return draftWith(({ task }) => {
			const variables = ['a', 'b'].map((name) => ({ ...unitVariable, name }));
			const held = { numbers: {}, choices: {}, formula, resultUnit: 'm', tolerance: 0.1 };
			Object.assign(task, { type: 'formula', ...held, variables });
		});
	}

	it('names the character at which it cannot be read', () => {
		const [fault] = findFaults(formulaDraft('a + c'), rigs);
		expect(fault?.text).toMatch(/^Character 5: “c” is neither a variable/);
	});

	it('is accepted with an unknown resolution', () => {
		expect(findFaults(formulaDraft('a + b'), rigs)).toEqual([]);
	});

	it('brings a caution when nobody can be perfect', () => {
		const found = findFaults(formulaDraft('a*a + b*b + 1'), rigs);
		expect(found.map(({ code, level }) => [code, level])).toEqual([['no-zero-inside', 'caution']]);
	});

	it('brings a caution when regions cannot be placed for its variables', () => {
		const draft = formulaDraft('a + b');
		draft.task.variables.push({ ...unitVariable, name: 'c' });
		expect(findFaults(draft, rigs)).toEqual([]);
		draft.task.variables.push({ ...unitVariable, name: 'd' });
		const [caution] = findFaults(draft, rigs);
		expect(caution).toMatchObject({ code: 'region-unplaceable', level: 'caution' });
		expect(caution?.text).toContain('3 directions');
	});

	it('brings a caution when a puck may be let go beyond its target', () => {
		const draft = draftWith(({ task }) => Object.assign(task.numbers, { D: 1 }));
		const caution = findFaults(draft, rigs).find(({ code }) => code === 'release-beyond-target');
		expect(caution).toMatchObject({ level: 'caution', place: 'Task' });
		expect(caution?.text).toContain('1 m');
	});

	it('refuses two variables of one name', () => {
		const draft = formulaDraft('a');
		Object.assign(draft.task.variables[1] ?? {}, { name: 'a' });
		expect(blockingCodes(draft)).toContain('name-twice');
	});
});

function setGap(draft: ProtocolDraft, index: number, gap: Partial<Gap>): void {
	Object.assign(draft.visits[index]?.gapBefore ?? {}, gap);
}

type Gap = ProtocolDraft['visits'][number]['gapBefore'];

function setTrials(draft: ProtocolDraft, visit: number, block: number, trials: number): void {
	Object.assign(draft.visits[visit]?.blocks[block] ?? {}, { trials });
}

type Variable = ProtocolDraft['task']['variables'][number];

function setVariable(draft: ProtocolDraft, index: number, change: Partial<Variable>): void {
	Object.assign(draft.task.variables[index] ?? {}, change);
}
