import { scaleMatrix } from '../linear-algebra/matrix.ts';
import { runRedundantTrial, startRedundantPerson } from '../learners/redundant-person.ts';
import type { RedundantTraits } from '../learners/redundant-traits.ts';
import { createRegionTest } from '../perturbations/escape-statistics.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import { computeFreeDirections } from '../tasks/free-directions.ts';
import { createScaledTask } from '../tasks/scaled-task.ts';
import type { Task } from '../tasks/task.ts';
import { computeNextTrialFactor } from '../variability/ellipsoid-factors.ts';

/** Trials under the region, and those at the end in which success is counted. */
const TRIALS = 150;
const LOOKED_AT = 20;

/**
 * Success at the end of 150 trials under a region that catches a share of the person's own trials.
 *
 * Method:  model learners at the task's origin; the region is the next-trial ellipsoid of 60 trials of
 *          their own motor noise; success = hit and not penalized, mean over the last 20 trials.
 * Source:  method sheet D2 (Measured).
 */
export function measureEscape(options: {
	task: Task;
	traits: RedundantTraits;
	share: number;
	peopleCount: number;
	seed: number;
}): { successShare: number; leftShare: number } {
	const task = createScaledTask(options.task);
	const { traits, share, peopleCount, seed } = options;
	const start = startRedundantPerson(
		task,
		options.task.variables.map(() => 0)
	);
	const region = {
		center: [...start.aim],
		shape: scaleMatrix(
			describeNoise(options.task, start.aim, traits),
			computeNextTrialFactor({
				trialCount: 60,
				variableCount: start.aim.length,
				probability: share
			})
		)
	};
	const isPenalized = createRegionTest(region);
	const people = Array.from({ length: peopleCount }, (_, i) => {
		const stream = createSeededStream(seed, i);
		let state = start;
		const good = Array.from({ length: TRIALS }, () => {
			const conditions = { shift: 0, isPenalized, feedback: 'shown' as const };
			const ran = runRedundantTrial({ task, traits, state, conditions, stream });
			({ state } = ran);
			return ran.outcome.hit && !ran.outcome.penalized;
		});
		const late = good.slice(-LOOKED_AT).filter(Boolean).length / LOOKED_AT;
		return { late, hasLeft: !isPenalized(state.aim) };
	});
	return {
		successShare: people.reduce((sum, { late }) => sum + late, 0) / peopleCount,
		leftShare: people.filter(({ hasLeft }) => hasLeft).length / peopleCount
	};
}

/** Covariance of the motor noise at a place. */
function describeNoise(given: Task, place: readonly number[], traits: RedundantTraits): number[][] {
	const task = createScaledTask(given);
	const free = computeFreeDirections(task, place);
	if (!free) throw new RangeError('the task has no clear free direction at its origin');
	const gained = traits.motorAlong ** 2 - traits.motorAcross ** 2;
	return place.map((_, i) =>
		place.map((_value, j) =>
			free.reduce(
				(sum, direction) => sum + gained * (direction[i] ?? 0) * (direction[j] ?? 0),
				i === j ? traits.motorAcross ** 2 : 0
			)
		)
	);
}
