import { z } from 'zod';
import type { Matrix } from '../../../../linear-algebra/vector.ts';
import { computeSymmetricEigen } from '../../../../linear-algebra/symmetric-eigen.ts';
import { computeArmPosture } from '../../../../tasks/models/arm.ts';
import { computeCloudAlignment } from '../../../../variability/cloud-alignment.ts';
import { computeEllipsoid } from '../../../../variability/compute-ellipsoid.ts';
import {
	computeCoverageFactor,
	computeMeanFactor,
	computeNextTrialFactor,
	type FactorRequest
} from '../../../../variability/ellipsoid-factors.ts';
import { computeGoalSensitivity } from '../../../../variability/goal-sensitivity.ts';
import { computeSquaredDistances } from '../../../../variability/mahalanobis.ts';
import { computeCovariance, computeMeanVector } from '../../../../variability/moments.ts';
import { computeToleranceFactor } from '../../../../variability/tolerance-factor.ts';
import { computeManifoldVariance } from '../../../../variability/uncontrolled-manifold.ts';
import { firstOf, forInputs, Judged, listSchema, repeat, type TopicGroup } from '../../topic.ts';
import { divisor, matrix, numbers, readTrials, requireOk, trialNames } from './case-inputs.ts';

const level = z.number().gt(0).lt(1);

/** Ellipsoids of one cloud, and how it lies to the solutions. */
export const STRUCTURE_TOPICS: TopicGroup = {
	ellipsoid: firstOf(
		forInputs(
			z.strictObject({
				n: listSchema,
				d: listSchema,
				level,
				kind: z.string().default('next trial')
			}),
			({ n, d, level: probability, kind }) => ({
				c2: n.map((trialCount, i) =>
					factorOf(kind, { trialCount, variableCount: at(d, n, i), probability })
				)
			})
		),
		forInputs(
			z.strictObject({ n: listSchema, d: listSchema, beta: listSchema, gamma: listSchema }),
			({ n, d, beta, gamma }) => ({
				c2: n.map((trialCount, i) =>
					computeToleranceFactor({
						...{ trialCount, variableCount: at(d, n, i) },
						...{ share: at(beta, n, i), confidence: at(gamma, n, i) }
					})
				)
			})
		),
		forInputs(
			z.strictObject({
				...trialNames,
				...{ kind: z.string(), level: level.optional(), c2: z.number().positive().optional() }
			}),
			({ kind, level: probability = 0.95, c2, ...inputs }, datasets) => {
				const trials = readTrials(inputs, datasets);
				const request = {
					trialCount: trials.length,
					variableCount: trials[0]?.length ?? 0,
					probability
				};
				return describeEllipsoid(trials, c2 ?? factorOf(kind, request));
			}
		)
	),
	ucm: firstOf(
		forInputs(
			z.strictObject({ ...trialNames, J: matrix, scale: numbers.optional(), divisor }),
			({ J, scale, ...inputs }, datasets) => {
				const trials = readTrials(inputs, datasets).map((trial) =>
					trial.map((value, i) => value * (scale?.[i] ?? 1))
				);
				const slopes = J.map((values) => values.map((value, i) => value / (scale?.[i] ?? 1)));
				return describeManifold(trials, slopes);
			}
		),
		forInputs(
			z.strictObject({ ...trialNames, lengths: numbers, result: z.string(), divisor }),
			({ lengths, result, ...inputs }, datasets) => {
				const trials = readTrials(inputs, datasets);
				const both = computeArmPosture(lengths, computeMeanVector(trials)).jacobian;
				return describeManifold(trials, /\bonly\b/.test(result) ? both.slice(0, 1) : both);
			}
		)
	),
	alignment: forInputs(z.strictObject({ ...trialNames, tangent: numbers }), (inputs, datasets) => {
		const covariance = computeCovariance(readTrials(inputs, datasets));
		const found = requireOk(computeCloudAlignment(covariance, [inputs.tangent]));
		return {
			major_axis: new Judged(found.majorAxis, { isSignFree: true }),
			angle_deg: found.angleDeg,
			eigenvalues: found.eigenvalues,
			eigenvalue_ratio: found.eigenvalueRatio,
			aspect_ratio: found.aspectRatio
		};
	})
};

function at(values: number[], all: number[], i: number): number {
	return repeat(values, all.length)[i] ?? Number.NaN;
}

/** @throws {RangeError} a kind that none of its words tells */
function factorOf(kind: string, request: FactorRequest): number {
	if (/\b(next|prediction)\b/i.test(kind)) return computeNextTrialFactor(request);
	if (/\b(mean|hotelling)\b/i.test(kind)) return computeMeanFactor(request);
	if (/\b(coverage|chi-square)\b/i.test(kind)) return computeCoverageFactor(request);
	if (/\bunit\b/i.test(kind)) return 1;
	throw new RangeError(`no ellipsoid of the kind “${kind}”`);
}

function describeEllipsoid(trials: number[][], c2: number) {
	const [mean, cov] = [computeMeanVector(trials), computeCovariance(trials)];
	const { halfAxes, directions, volume } = computeEllipsoid({ mean, covariance: cov, factor: c2 });
	const eigenvalues = [...computeSymmetricEigen(cov).values].reverse();
	const [x = 1, y = 0] = directions[0] ?? [];
	const distances = requireOk(
		computeSquaredDistances({ executions: trials, center: mean, covariance: cov })
	).values;
	return {
		...{ mean, cov, c2, eigenvalues, volume },
		half_axes: halfAxes,
		major_axis_angle_deg: ((Math.atan2(y, x) * 180) / Math.PI + 180) % 180,
		det: eigenvalues.reduce((product, value) => product * value, 1),
		inside: distances.filter((value) => value <= c2).length,
		max_mahalanobis_sq: Math.max(...distances)
	};
}

function describeManifold(trials: number[][], J: Matrix) {
	const found = requireOk(computeManifoldVariance(trials, J));
	return {
		...{ V_ucm: found.along, V_ort: found.across, V_tot: found.total },
		...{ ratio: found.ratio, log_ratio: found.logRatio, delta_V: found.index },
		...{ delta_V_z: found.indexZ, half_log_ratio_identity: found.indexZ },
		result_sd: requireOk(computeGoalSensitivity(computeCovariance(trials), J)).goalSd
	};
}
