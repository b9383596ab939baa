import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeNormalPoints } from '../statistics/r-sequence.ts';
import { createTask } from '../tasks/create-task.ts';
import { taskRecordSchema, type TaskRecordInput } from '../tasks/task-record.ts';
import type { Task } from '../tasks/task.ts';
import { canonicalJson } from './canonical-json.ts';
import { chooseForTask, chooseNextBlock } from './choose-next-block.ts';
import type { Decision } from './decision.ts';
import { explainDecision } from './explain.ts';
import { PUCK_RECORD, spreadAlongManifold } from './planted-trials.test-data.ts';
import type { PolicyMemory } from './policy-memory.ts';
import { policySettingsSchema } from './policy-settings.ts';
import { policyStateSchema, type PolicyStateInput } from './policy-state.ts';

const QUICK = { settle: { minBlocks: 1, maxBlocks: 1 }, place: { pointCount: 128 } };

function decide(
	state: Partial<PolicyStateInput>,
	task: TaskRecordInput = PUCK_RECORD,
	protocol = QUICK
): Decision {
	return chooseNextBlock({ state: { day: 1, blockInDay: 1, ...state }, protocol, task });
}

const variable = (name: string, min: number, max: number) => ({
	...{ name, unit: 'u', min, max, origin: (min + max) / 2, scale: (max - min) / 12 }
});

/** Hand angle alone is the result: the other two variables are free. */
const REACH: TaskRecordInput = {
	...{ type: 'formula', formula: 'hand_angle_deg', tolerance: 5, resultUnit: 'deg' },
	variables: [
		variable('hand_angle_deg', -90, 90),
		variable('peak_radial_velocity_mm_s', 0, 1200),
		variable('max_radial_distance_mm', 60, 180)
	]
};

/** One result of four forces: three free directions, too many for a region. */
const FOUR: TaskRecordInput = {
	...{ type: 'linear', coef: [1, 1, 1, 1], target: 40, tolerance: 1, resultUnit: 'N' },
	variables: ['a', 'b', 'c', 'd'].map((name) => variable(name, 4, 16))
};

function spread(record: TaskRecordInput, count: number): number[][] {
	const { variables } = taskRecordSchema.parse(record);
	return computeNormalPoints(count, variables.length).map((point) =>
		point.map((z, i) => {
			const { origin = 0, scale = 1 } = variables[i] ?? {};
			return origin + 0.5 * scale * z;
		})
	);
}

/** Plain blocks in a row; the memory and the last decision. */
function runBlocks(record: TaskRecordInput, count: number, trials: number[][]): Decision {
	let memory: PolicyMemory | undefined;
	let decision = decide({}, record);
	for (let block = 0; block < count; block++) {
		decision = decide(
			{ last: { kind: 'practice', trials }, ...(memory ? { memory } : {}) },
			record
		);
		memory = decision.memory;
	}
	return decision;
}

describe('chooseNextBlock on any input', () => {
	it('answers with plain JSON, a sentence for every code and no NaN', () => {
		const value = fc.double({ min: -3, max: 3, noNaN: true });
		const block = fc.record({
			kind: fc.constantFrom('baseline', 'practice', 'probe', 'region', 'washout', 'rest'),
			count: fc.integer({ min: 0, max: 60 }),
			shift: fc.tuple(value, value),
			squeeze: fc.constantFrom(0, 0.2, 1, 3)
		});
		const points = computeNormalPoints(60, 2);
		fc.assert(
			fc.property(fc.array(block, { maxLength: 6 }), (blocks) => {
				let memory: PolicyMemory | undefined;
				for (const { kind, count, shift, squeeze } of blocks) {
					const isRegionOpen =
						memory?.active?.kind === 'region' || memory?.planned?.kind === 'region';
					const run = kind === 'region' && !isRegionOpen ? 'practice' : kind;
					const trials = points
						.slice(0, count)
						.map(([a = 0, b = 0]) => [
							2.486 + 0.09 * (a + shift[0]),
							0.25 + 0.07 * (squeeze * b - a + shift[1])
						]);
					const decision = decide({
						last: { kind: run as 'practice', trials },
						...(memory ? { memory } : {})
					});
					({ memory } = decision);
					expectSound(decision);
				}
			}),
			{ numRuns: 40 }
		);
	}, 60_000);

	it('does not depend on how often it is asked', () => {
		const first = decide({ last: { kind: 'practice', trials: spread(FOUR, 60) } }, FOUR);
		const asked = [1, 2, 3, 4, 5].reduce<Decision>(
			(decision) => decide({ memory: decision.memory }, FOUR),
			first
		);
		expect([asked.kind, asked.reasons[0]?.code]).toEqual([first.kind, first.reasons[0]?.code]);
		expect(asked.memory.noChallenge).toBe(first.memory.noChallenge);
		expect(asked.memory.recent).toEqual(first.memory.recent);
	});

	it('holds after three blocks in a row without a challenge', () => {
		const record = { ...FOUR };
		const protocol = { ...QUICK, aims: { region: { share: 1, escapes: 1 } } };
		let memory: PolicyMemory | undefined;
		const codes = [1, 2, 3, 4].map(() => {
			const decision = chooseNextBlock({
				...{ protocol, task: record },
				state: {
					...{ day: 1, blockInDay: 1, last: { kind: 'practice', trials: spread(FOUR, 60) } },
					...(memory ? { memory } : {})
				}
			});
			({ memory } = decision);
			return decision.reasons[0]?.code;
		});
		expect(codes).toEqual(['NO-CHALLENGE', 'NO-CHALLENGE', 'NO-CHALLENGE', 'STUCK']);
	});
});

describe('tasks of several variables', () => {
	it('works with two free directions: a region, a shift or a reason why not', () => {
		const decision = runBlocks(REACH, 2, spread(REACH, 60));
		expect(['region', 'shift', 'practice']).toContain(decision.kind);
		expect(decision.facts.place?.length).toBeGreaterThan(0);
		expect(decision.facts.geometry).toMatchObject({ alignmentDeg: expect.any(Number) });
		expectSound(decision);
	});
});

describe('tasks in which no region can be placed', () => {
	it('says that the solutions have too many directions and offers what is possible', () => {
		const decision = runBlocks(FOUR, 2, spread(FOUR, 60));
		expect(decision.facts.aims?.refused.region).toBe('MORE-FREE-DIRECTIONS');
		expect(decision.facts.geometry).toMatchObject({ sdTangent: null });
		expect([decision.kind, decision.reasons[0]?.code]).toEqual(['shift', 'REGION-IMPOSSIBLE']);
		expectSound(decision);
	});

	it('checks the gates without a tangent', () => {
		const { facts } = runBlocks(FOUR, 1, spread(FOUR, 60));
		expect(facts.gates?.codes).toEqual(['OK']);
		expect(facts.gates?.splitD).toHaveLength(1);
	});

	it('practises when a task has as many results as variables', () => {
		const puck = createTask(PUCK_RECORD);
		const results = (x: readonly number[]) => [puck.evaluate(x), 0.001 * ((x[0] ?? 0) - 2.486)];
		const jacobian = (x: readonly number[]) => [puck.gradient(x), [0.001, 0]];
		const task: Task = { ...puck, resultCount: 2, results, jacobian };
		const settings = policySettingsSchema.parse(QUICK);
		const last = { kind: 'practice' as const, trials: spreadAlongManifold(60) };
		const state = policyStateSchema.parse({ day: 1, blockInDay: 1, last });
		const decision = chooseForTask({ state, settings, task });
		expect([decision.kind, decision.reasons[0]?.code]).toEqual(['practice', 'NO-CHALLENGE']);
		expect(decision.facts.aims?.refused).toEqual({
			...{ region: 'NO-FREE-DIRECTION', shift: 'TWO-RESULTS' }
		});
	});

	it('works with a single variable', () => {
		const single: TaskRecordInput = {
			...{ type: 'linear', coef: [1], target: 0, tolerance: 1, resultUnit: 'N' },
			variables: [variable('F', -6, 6)]
		};
		const decision = runBlocks(single, 1, spread(single, 60));
		expect(decision.facts.aims?.refused.region).toBe('NO-FREE-DIRECTION');
		expectSound(decision);
	});

	it('leaves out trials that have no result and counts them', () => {
		const root: TaskRecordInput = {
			...{ type: 'formula', formula: 'sqrt(a) - b', tolerance: 0.5, resultUnit: '' },
			variables: [variable('a', -1, 5), variable('b', 0, 3)]
		};
		const trials = [...spread(root, 40), [-1, 1], [-0.5, 1]];
		const decision = runBlocks(root, 1, trials);
		expect(decision.facts.gates?.undefinedResultCount).toBe(2);
		expect(decision.memory.cloud?.n).toBe(40);
		expectSound(decision);
	});
});

describe('a running shift over a gap', () => {
	it('is taken back once, however often it is asked', () => {
		const rule = { sigma: 1, goal: 3 };
		const errors = Array.from({ length: 60 }, () => 0);
		const { memory } = runBlocks(PUCK_RECORD, 1, spreadAlongManifold(60));
		const last = { kind: 'shift' as const, errors, rule: { ...RULE, ...rule } };
		const first = decide({ last, memory });
		const asked = decide({ gapHours: 24, memory: first.memory });
		const again = decide({ gapHours: 24, memory: asked.memory });
		expect(asked.reasons[0]?.code).toBe('CONTINUE-SHIFT');
		expect(asked.parameters.level).toBeLessThan(first.parameters.level ?? 0);
		expect(again.parameters).toEqual(asked.parameters);
	});
});

const RULE = {
	...policySettingsSchema.parse({}).shift.rule,
	...{ bias: 0, r: 0, n0: 180, hit0: 1 }
};

function expectSound(decision: Decision): void {
	const text = canonicalJson(decision);
	expect(text).not.toMatch(/NaN|Infinity/);
	const settings = policySettingsSchema.parse(QUICK);
	const { reasons, ladder, shares, refused } = explainDecision(decision, {
		...{ resultUnit: 'm', settings }
	});
	const words = [...reasons, ...ladder, ...shares, ...refused].map((part) => part.text).join(' ');
	expect(words).not.toMatch(/engine answered|undefined|NaN/);
}
