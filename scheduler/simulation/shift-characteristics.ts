import { TargetShift } from '../perturbations/target-shift.ts';
import {
	shiftRuleSchema,
	shiftSettingsSchema,
	type ShiftRule
} from '../perturbations/shift-rule.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import { drawNormal, type Uint32Stream } from '../random/random-stream.ts';
import { stepTwoRate, TWO_RATE_PUBLISHED, type TwoRate } from '../learners/two-rate.ts';
import { estimateLagOne, estimateRobustSd } from '../variability/serial-dependence.ts';
import { computeMean, computeMedian } from '../variability/moments.ts';

/** How a person takes back errors; null rates: does not adapt at all. */
export interface ShiftLearner {
	readonly name: string;
	readonly rates: { readonly retention: number; readonly rate: number } | TwoRate | null;
}

export const SHIFT_LEARNERS: readonly ShiftLearner[] = [
	{ name: 'does not adapt', rates: null },
	{ name: 'a = .97, b = .03', rates: { retention: 0.97, rate: 0.03 } },
	{ name: 'a = .99, b = .11', rates: { retention: 0.99, rate: 0.11 } },
	{ name: 'a = 1, b = .2', rates: { retention: 1, rate: 0.2 } },
	{ name: 'two rates', rates: TWO_RATE_PUBLISHED }
];

export interface ShiftCharacteristics {
	/** Share of people who passed the first step, reached the goal, were frozen. */
	readonly passedShare: number;
	readonly heldShare: number;
	readonly frozenShare: number;
	/** Median trials to the first pass and to the goal, the unshifted ones included; null: nobody. */
	readonly passedTrials: number | null;
	readonly heldTrials: number | null;
}

export interface ShiftExperiment {
	readonly learner: ShiftLearner;
	/** Lag-1 correlation of the motor noise. */
	readonly lagOne: number;
	readonly peopleCount: number;
	readonly seed: number;
	/** Level to reach in SD of the result. */
	readonly goalSd?: number;
	readonly settings?: { firstStepSd?: number; granularity?: 'trial' | 'block' };
	readonly trialsMax?: number;
	/** Half width of the target in SD of the result; left out: 70 % of unshifted trials hit. */
	readonly toleranceSd?: number;
}

/** Plain blocks behind spread, bias and correlation. */
const BASELINE = { blocks: 2, trials: 60 } as const;
/** Half width of the target at which 70 % of normal trials hit. */
const TOLERANCE_SD = 1.0364;
const BLOCK_TRIALS = 60;

/**
 * What the shift rule does to people of one kind: who passes, how long it takes, who is frozen.
 *
 * Units:   shares; trials.
 * Method:  each person makes two plain blocks, from which the rule is prepared as in the product, then
 *          runs it on normal noise of SD 1 with the given lag-1 correlation; every look, the retreat and
 *          the second try count.
 * Source:  method sheet D3 (table). Accuracy: shares ± √(p(1 − p)/peopleCount).
 */
export function measureShift(experiment: ShiftExperiment): ShiftCharacteristics {
	const people = Array.from({ length: experiment.peopleCount }, (_, i) =>
		runPerson(experiment, createSeededStream(experiment.seed + i))
	);
	const share = (count: number) => count / people.length;
	const passed = people.flatMap(({ passedAt }) => passedAt ?? []);
	const held = people.flatMap(({ heldAt }) => heldAt ?? []);
	return {
		passedShare: share(passed.length),
		heldShare: share(held.length),
		frozenShare: share(people.filter(({ isFrozen }) => isFrozen).length),
		passedTrials: passed.length > 0 ? computeMedian(passed) : null,
		heldTrials: held.length > 0 ? computeMedian(held) : null
	};
}

function runPerson(experiment: ShiftExperiment, stream: Uint32Stream) {
	const { lagOne, toleranceSd = TOLERANCE_SD } = experiment;
	const drawNoise = createNoise(stream, lagOne);
	const blocks = Array.from({ length: BASELINE.blocks }, () =>
		Array.from({ length: BASELINE.trials }, drawNoise)
	);
	const shift = new TargetShift(prepareRule(experiment, blocks));
	const learner = createLearner(experiment.learner);
	for (let trial = 1; trial <= (experiment.trialsMax ?? 400); trial++) {
		const error = shift.level - (learner.adapted() + drawNoise());
		learner.learn(error);
		const hit = Math.abs(error) <= toleranceSd;
		shift.observe({ error, hit, leftToday: null, isLastOfBlock: trial % BLOCK_TRIALS === 0 });
		if (isOver(shift)) break;
	}
	const { firstStepSd, stepCapSd, sigma, goal } = shift.rule;
	const firstStep = Math.min(Math.min(firstStepSd, stepCapSd) * sigma, Math.abs(goal));
	// After a retreat a lower level may be passed: that is not the first step yet.
	const pass = shift.log.find(
		({ rule, thetaBefore }) =>
			(rule === 'F1' || rule === 'F2') && Math.abs(thetaBefore) >= firstStep - 1e-9
	);
	const end = shift.log.find(({ action }) => action === 'goal-held');
	return {
		passedAt: pass?.trial ?? null,
		heldAt: end?.trial ?? null,
		isFrozen: shift.dump().status === 'frozen'
	};
}

function isOver({ log }: TargetShift): boolean {
	const action = log.at(-1)?.action;
	return action === 'goal-held' || action === 'freeze';
}

/** As the selector prepares it from plain blocks. */
function prepareRule(
	{ goalSd = 3, settings = {}, toleranceSd = TOLERANCE_SD }: ShiftExperiment,
	blocks: readonly number[][]
): ShiftRule {
	const sds = blocks.map(estimateRobustSd);
	const sigma = Math.sqrt(computeMean(sds.map((sd) => sd * sd)));
	const results = blocks.flat();
	return shiftRuleSchema.parse({
		...shiftSettingsSchema.parse(settings),
		...{ sigma, goal: goalSd * sigma, n0: results.length },
		bias: -computeMean(results),
		r: computeMean(blocks.map((block) => estimateLagOne([block]))),
		hit0: results.filter((result) => Math.abs(result) <= toleranceSd).length / results.length
	});
}

/** Normal noise of SD 1 whose neighbours correlate. */
export function createNoise(stream: Uint32Stream, lagOne: number): () => number {
	let last = drawNormal(stream);
	const fresh = Math.sqrt(1 - lagOne * lagOne);
	return () => (last = lagOne * last + fresh * drawNormal(stream));
}

function createLearner({ rates }: ShiftLearner) {
	if (rates === null) return { adapted: () => 0, learn: () => undefined };
	if ('fastRate' in rates) {
		let state = { fast: 0, slow: 0 };
		return {
			adapted: () => state.fast + state.slow,
			learn: (error: number) => {
				state = stepTwoRate(rates, state, { kind: 'clamp', error });
			}
		};
	}
	let adapted = 0;
	return {
		adapted: () => adapted,
		learn: (error: number) => {
			adapted = rates.retention * adapted + rates.rate * error;
		}
	};
}
