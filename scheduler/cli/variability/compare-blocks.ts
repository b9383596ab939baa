import { z } from 'zod';
import type { Matrix } from '../../linear-algebra/vector.ts';
import { createTask } from '../../tasks/create-task.ts';
import { computeCloudOverlap, type NormalCloud } from '../../variability/cloud-overlap.ts';
import { compareCoordinates } from '../../variability/compare-coordinates.ts';
import { convertExecutions } from '../../variability/coordinates.ts';
import {
	computeCovarianceDistance,
	computeLogEuclideanDistance,
	computeLogVolumeRatio
} from '../../variability/covariance-distance.ts';
import { computeEllipseIntersection } from '../../variability/ellipse-intersection.ts';
import { computeNextTrialFactor } from '../../variability/ellipsoid-factors.ts';
import { computeSeparation } from '../../variability/ellipsoid-separation.ts';
import { scaleMatrix } from '../../linear-algebra/matrix.ts';
import { computeCovariance, computeMeanVector } from '../../variability/moments.ts';
import { failureSchema, measureNames, requireWidths, trialsSchema } from './block-inputs.ts';
import { comparisonSchema, createFirstSystem, createSecondSystem } from './second-system.ts';

export const overlapInputSchema = z
	.strictObject({
		task: measureNames.task,
		before: trialsSchema,
		after: trialsSchema,
		probability: z.number().gt(0).lt(1).default(0.9).describe('of the next-trial ellipsoids'),
		second: measureNames.second
	})
	.superRefine((input, context) => {
		requireWidths(input, { before: input.before, after: input.after }, context);
		for (const name of ['before', 'after'] as const)
			if (input[name].length <= input.task.variables.length)
				context.addIssue({
					code: 'custom',
					path: [name],
					message: `a cloud of ${input.task.variables.length} variables needs more trials than that`
				});
	});

export const overlapSchema = z.union([
	z.strictObject({
		ok: z.literal(true),
		/** In scaled coordinates. */
		distances: z.strictObject({
			affineInvariant: z.number(),
			logEuclidean: z.number(),
			logVolumeRatio: z.number()
		}),
		overlap: z.strictObject({
			bhattacharyyaDistance: z.number(),
			bhattacharyyaCoefficient: z.number(),
			hellinger: z.number(),
			divergenceFromFirst: z.number(),
			divergenceFromSecond: z.number(),
			wasserstein: z.number()
		}),
		/** Of the next-trial ellipsoids. */
		separation: z.strictObject({
			kMin: z.number(),
			touchingScale: z.number(),
			isSeparate: z.boolean()
		}),
		/** null: not two variables. */
		intersection: z
			.strictObject({
				...{ firstArea: z.number(), secondArea: z.number(), area: z.number() },
				...{ shareOfFirst: z.number(), shareOfSecond: z.number(), jaccard: z.number() }
			})
			.nullable(),
		secondSystem: z.strictObject({ coefficient: comparisonSchema, wasserstein: comparisonSchema })
	}),
	failureSchema
]);

/** How far two blocks of trials lie apart. */
export function compareBlocks(input: z.output<typeof overlapInputSchema>) {
	const task = createTask(input.task);
	const blocks = [input.before, input.after];
	const first = createFirstSystem(task);
	const clouds = blocks.map((trials) => describe(convertExecutions(trials, first) ?? []));
	const found = overlapOf(clouds);
	if (!found.ok) return found;
	const { ok, ...overlap } = found;
	const second = createSecondSystem(task, blocks, input.second);
	const compare = (name: 'bhattacharyyaCoefficient' | 'wasserstein') =>
		compareCoordinates({
			...{ blocks, first, second },
			measure: (written) => {
				const there = overlapOf(written.map(describe));
				return there.ok ? { ok: true, value: there[name] } : there;
			}
		});
	return {
		...{ ok, overlap, ...compareShapes(clouds, blocks, input.probability) },
		secondSystem: {
			coefficient: compare('bhattacharyyaCoefficient'),
			wasserstein: compare('wasserstein')
		}
	};
}

function describe(executions: Matrix): NormalCloud {
	return { mean: computeMeanVector(executions), covariance: computeCovariance(executions) };
}

function overlapOf([before, after]: readonly NormalCloud[]) {
	if (!before || !after) throw new RangeError('an overlap needs two clouds');
	return computeCloudOverlap(before, after);
}

function compareShapes(
	clouds: readonly NormalCloud[],
	blocks: readonly Matrix[],
	probability: number
) {
	const [A = [], B = []] = clouds.map(({ covariance }) => covariance);
	const shapes = clouds.map(({ mean, covariance }, i) => {
		const counts = { trialCount: blocks[i]?.length ?? 0, variableCount: mean.length };
		return {
			center: mean,
			shape: scaleMatrix(covariance, computeNextTrialFactor({ ...counts, probability }))
		};
	});
	const [one, two] = shapes;
	if (!one || !two) throw new RangeError('an overlap needs two clouds');
	const separation = computeSeparation(one, two);
	const cut = one.center.length === 2 ? computeEllipseIntersection(one, two) : null;
	return {
		distances: {
			affineInvariant: computeCovarianceDistance(A, B),
			logEuclidean: computeLogEuclideanDistance(A, B),
			logVolumeRatio: computeLogVolumeRatio(A, B)
		},
		separation: { ...separation, isSeparate: separation.kMin < 0 },
		intersection: cut?.ok ? withoutOk(cut) : null
	};
}

function withoutOk<T extends { ok: true }>({ ok: _ok, ...rest }: T): Omit<T, 'ok'> {
	return rest;
}
