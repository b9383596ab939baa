import { z } from 'zod';
import { diagonal, multiplyMatrices, scaleMatrix } from '../../linear-algebra/matrix.ts';
import type { Matrix, Vector } from '../../linear-algebra/vector.ts';
import type { ScaledTask } from '../../tasks/scaled-task.ts';
import { estimateMcd } from '../../variability/estimate-mcd.ts';
import { estimateOgk } from '../../variability/estimate-ogk.ts';
import { flagOutliers } from '../../variability/flag-outliers.ts';
import { computeCovariance, computeMeanVector } from '../../variability/moments.ts';
import { poolWithPrior, PRIOR_WEIGHT } from '../../variability/pool-covariance.ts';
import { shrinkCovariance } from '../../variability/shrink-covariance.ts';
import { trimOutliers } from '../../variability/trim-outliers.ts';

/** How the mean and the covariance of a cloud are estimated. */
export const estimateSchema = z.discriminatedUnion('method', [
	z.strictObject({ method: z.literal('plain') }),
	z.strictObject({ method: z.literal('trimmed').describe('iterated trimming of strays') }),
	z.strictObject({
		method: z.literal('mcd').describe('the half of the trials closest together'),
		share: z.number().min(0.5).max(1).default(0.5),
		starts: z.int().min(1).max(100_000).default(500),
		seed: z.int().default(1)
	}),
	z.strictObject({ method: z.literal('ogk').describe('by pairs of variables') }),
	z.strictObject({
		method: z.literal('ledoit-wolf').describe('few trials: towards a round cloud')
	}),
	z.strictObject({
		method: z.literal('prior').describe('few trials: held up by an earlier covariance'),
		covariance: z.array(z.array(z.number())).describe('of the earlier trials, in units'),
		weight: z.number().positive().default(PRIOR_WEIGHT).describe('in degrees of freedom')
	})
]);

const numbers = z.array(z.number());

export const estimateResultSchema = z.union([
	z.strictObject({
		ok: z.literal(true),
		method: z.string(),
		/** In units. */
		mean: numbers,
		covariance: z.array(numbers),
		/** Numbers of the trials that Σ was taken without, and of those far outside; the first is 1. */
		leftOut: z.array(z.int()),
		outliers: z.array(z.int())
	}),
	z.strictObject({ ok: z.literal(false), method: z.string(), reason: z.string() })
]);

type EstimateRequest = z.output<typeof estimateSchema>;
type Estimate =
	| { ok: true; mean: Vector; covariance: Matrix; kept?: readonly boolean[] }
	| { ok: false; reason: string };

/**
 * Mean and covariance of trials by the method asked for, back in units; executions are scaled.
 * @throws {RangeError} an earlier covariance of another size, or too few trials for the method
 */
export function estimateCloud(task: ScaledTask, executions: Matrix, request: EstimateRequest) {
	const { method } = request;
	const found = estimate(task, executions, request);
	if (!found.ok) return { ok: false as const, method, reason: found.reason };
	const { mean, covariance, kept = executions.map(() => true) } = found;
	const flags = flagOutliers({ executions, center: mean, covariance });
	return {
		...{ ok: true as const, method, mean: task.toUnits(mean) },
		covariance: rescale(covariance, scalesOf(task)),
		leftOut: listNumbers(kept.map((isKept) => !isKept)),
		outliers: flags.ok ? listNumbers(flags.isOutlier) : []
	};
}

function estimate(task: ScaledTask, executions: Matrix, request: EstimateRequest): Estimate {
	const mean = computeMeanVector(executions);
	switch (request.method) {
		case 'plain':
			return { ok: true, mean, covariance: computeCovariance(executions) };
		case 'trimmed':
			return trimOutliers(executions);
		case 'mcd':
			return estimateMcd(executions, {
				...{ share: request.share, startCount: request.starts, seed: request.seed }
			});
		case 'ogk': {
			const cloud = estimateOgk(executions);
			if (!cloud.ok) return cloud;
			return { ...cloud, covariance: scaleMatrix(cloud.covariance, cloud.consistency) };
		}
		case 'ledoit-wolf':
			return { ok: true, mean, covariance: shrinkCovariance(executions).covariance };
		case 'prior':
			return { ok: true, mean, covariance: pool(task, executions, request) };
	}
}

function pool(
	task: ScaledTask,
	executions: Matrix,
	{ covariance, weight }: { covariance: Matrix; weight: number }
): number[][] {
	const d = task.variableCount;
	if (covariance.length !== d || covariance.some((values) => values.length !== d))
		throw new RangeError(`estimate.covariance must have ${d} rows of ${d} numbers`);
	return poolWithPrior({
		base: rescale(
			covariance,
			scalesOf(task).map((scale) => 1 / scale)
		),
		sample: computeCovariance(executions),
		...{ trialCount: executions.length, priorWeight: weight }
	});
}

/** What one scaled unit of each variable is in its own unit. */
function scalesOf(task: ScaledTask): number[] {
	const at = (value: number) => task.toUnits(new Array<number>(task.variableCount).fill(value));
	const zero = at(0);
	return at(1).map((value, i) => value - (zero[i] ?? 0));
}

function rescale(covariance: Matrix, scales: Vector): number[][] {
	const D = diagonal(scales);
	return multiplyMatrices(multiplyMatrices(D, covariance), D);
}

/** Numbers of the marked trials; the first is 1. */
function listNumbers(isMarked: readonly boolean[]): number[] {
	return isMarked.flatMap((marked, i) => (marked ? [i + 1] : []));
}
