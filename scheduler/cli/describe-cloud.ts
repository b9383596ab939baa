import { z } from 'zod';
import { transpose } from '../linear-algebra/matrix.ts';
import type { Matrix } from '../linear-algebra/vector.ts';
import { computeCloudGeometry } from '../policies/cloud-geometry.ts';
import { createTask } from '../tasks/create-task.ts';
import { createScaledTask } from '../tasks/scaled-task.ts';
import { computeEllipsoid } from '../variability/compute-ellipsoid.ts';
import {
	computeCoverageFactor,
	computeMeanFactor,
	computeNextTrialFactor
} from '../variability/ellipsoid-factors.ts';
import { computeCovariance, computeMeanVector } from '../variability/moments.ts';
import { computeEffectiveCount, estimateLagOne } from '../variability/serial-dependence.ts';
import { computeToleranceFactor } from '../variability/tolerance-factor.ts';
import { trimOutliers } from '../variability/trim-outliers.ts';
import { trialsInputSchema } from './trial-inputs.ts';
import {
	estimateCloud,
	estimateResultSchema,
	estimateSchema
} from './variability/estimate-cloud.ts';

const probability = z.number().gt(0).lt(1);

export const cloudInputSchema = z
	.strictObject({
		...trialsInputSchema.shape,
		/** Probability of the ellipsoids; for the tolerance ellipsoid the share of the population. */
		probability: probability.default(0.9),
		/** Confidence of the tolerance ellipsoid. */
		confidence: probability.default(0.95),
		/** Which mean and covariance the ellipsoids are drawn of. */
		estimate: estimateSchema.prefault({ method: 'plain' })
	})
	.superRefine((input, context) => {
		const checked = trialsInputSchema.safeParse({ task: input.task, trials: input.trials });
		for (const issue of checked.error?.issues ?? [])
			context.addIssue({ code: 'custom', path: [...issue.path], message: issue.message });
		if (input.trials.length <= input.task.variables.length)
			context.addIssue({
				code: 'custom',
				path: ['trials'],
				message: `a cloud of ${input.task.variables.length} variables needs more trials than that`
			});
	});

const numbers = z.array(z.number());
const moments = z.strictObject({ mean: numbers, covariance: z.array(numbers) });

export const cloudSchema = z.strictObject({
	n: z.int(),
	inUnits: moments,
	scaled: moments,
	/** Of the estimate that was asked for. */
	estimate: estimateResultSchema,
	/** null: the estimate could not be made. */
	ellipsoids: z
		.array(
			z.strictObject({
				kind: z.enum(['coverage', 'mean', 'nextTrial', 'tolerance']),
				factor: z.number(),
				center: numbers,
				halfAxes: numbers,
				directions: z.array(numbers),
				volume: z.number()
			})
		)
		.nullable(),
	/** Trials resemble their neighbours: how many independent ones they are worth for the mean. */
	serial: z.strictObject({
		lagOne: z.number(),
		effectiveCount: z.number(),
		/** c² of the mean ellipsoid for so many; null: not more than there are variables. */
		meanFactor: z.number().nullable()
	}),
	/** Numbers of the trials that trimming leaves out; null: it cannot be told. */
	strayTrials: z.array(z.int()).nullable(),
	geometry: z
		.strictObject({
			alignmentDeg: z.number().nullable(),
			eigenvalueRatio: z.number(),
			sdTangent: z.number().nullable()
		})
		.nullable()
});

/** Mean, covariance, the four ellipsoids, stray trials and the lie of the cloud. */
export function describeCloud(input: z.output<typeof cloudInputSchema>) {
	const task = createScaledTask(createTask(input.task));
	const executions = input.trials.map((trial) => task.toScaled(trial));
	const scaled = {
		n: executions.length,
		mean: computeMeanVector(executions),
		cov: computeCovariance(executions)
	};
	const trimmed = trimOutliers(executions);
	const estimate = estimateCloud(task, executions, input.estimate);
	const factors = computeFactors(input);
	return {
		n: input.trials.length,
		inUnits: { mean: computeMeanVector(input.trials), covariance: computeCovariance(input.trials) },
		scaled: { mean: scaled.mean, covariance: scaled.cov },
		estimate,
		ellipsoids: estimate.ok
			? Object.entries(factors).map(([kind, factor]) => ({
					...{ kind, factor },
					...computeEllipsoid({ mean: estimate.mean, covariance: estimate.covariance, factor })
				}))
			: null,
		serial: describeSerial(executions, input.probability),
		strayTrials: trimmed.ok ? listStray(trimmed.kept) : null,
		geometry: isFlat(scaled.cov) ? null : computeCloudGeometry(task, scaled)
	};
}

function describeSerial(executions: Matrix, share: number) {
	const lagOne = executions.length < 3 ? 0 : estimateLagOne(transpose(executions));
	const effectiveCount = computeEffectiveCount(executions.length, lagOne);
	const variableCount = executions[0]?.length ?? 0;
	const request = { trialCount: effectiveCount, variableCount, probability: share };
	const meanFactor = effectiveCount > variableCount ? computeMeanFactor(request) : null;
	return { lagOne, effectiveCount, meanFactor };
}

function computeFactors(input: z.output<typeof cloudInputSchema>) {
	const { probability: share, confidence } = input;
	const counts = { trialCount: input.trials.length, variableCount: input.task.variables.length };
	return {
		coverage: computeCoverageFactor({ ...counts, probability: share }),
		mean: computeMeanFactor({ ...counts, probability: share }),
		nextTrial: computeNextTrialFactor({ ...counts, probability: share }),
		tolerance: computeToleranceFactor({ ...counts, share, confidence })
	};
}

/** Numbers of the trials that trimming leaves out; the first is 1. */
function listStray(kept: readonly boolean[]): number[] {
	return kept.flatMap((isKept, i) => (isKept ? [] : [i + 1]));
}

function isFlat(covariance: Matrix): boolean {
	return covariance.some((values, i) => !((values[i] ?? 0) > 0));
}
