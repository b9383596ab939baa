import { z } from 'zod';
import { multiplyVector, type Matrix } from '../../../../linear-algebra/vector.ts';
import { splitRowSpace } from '../../../../linear-algebra/row-space.ts';
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
import {
	computeFluctuationExponent,
	computeLagOne
} from '../../../../variability/fluctuation-analysis.ts';
import {
	computeGoalSensitivity,
	splitGoalSeries
} from '../../../../variability/goal-sensitivity.ts';
import { computeSquaredDistances } from '../../../../variability/mahalanobis.ts';
import {
	computeCovariance,
	computeMeanVector,
	computeStandardDeviation
} from '../../../../variability/moments.ts';
import { computeToleranceFactor } from '../../../../variability/tolerance-factor.ts';
import { computeManifoldVariance } from '../../../../variability/uncontrolled-manifold.ts';
import { firstOf, forInputs, Judged, listSchema, repeat, type TopicGroup } from '../../topic.ts';
import { matrix, numbers, readTrials, requireOk, trialNames } from './case-inputs.ts';

const divisor = z.literal('n-1').default('n-1');
const withScales = { divisor, scales: numbers.optional() };
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
	}),
	gem: firstOf(
		forInputs(
			z.strictObject({ ...trialNames, J: matrix, divisor, scales: numbers.optional() }),
			({ J, scales, ...inputs }, datasets) => {
				const trials = readTrials(inputs, datasets);
				return { ...describeGoal(trials, J), ...describeSeries(trials, J, scales) };
			}
		),
		forInputs(
			z.strictObject({
				...trialNames,
				normal: numbers,
				tangent: numbers.optional(),
				...withScales
			}),
			({ normal, scales, ...inputs }, datasets) =>
				describeSeries(readTrials(inputs, datasets), [normal], scales)
		),
		forInputs(
			z.strictObject({ ...trialNames, tangent: numbers, ...withScales }),
			({ tangent, scales, ...inputs }, datasets) =>
				describeSeries(readTrials(inputs, datasets), splitRowSpace([tangent]).complement, scales)
		)
	)
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

function describeGoal(trials: number[][], J: Matrix) {
	const found = requireOk(computeGoalSensitivity(computeCovariance(trials), J));
	const results = trials.map((trial) => multiplyVector(J, trial)[0] ?? 0);
	return {
		...{ goal_sd: found.goalSd, goal_cov: found.goalCovariance },
		goal_sd_from_results: computeStandardDeviation(results),
		singular_value: found.singularValues[0],
		singular_values: found.singularValues,
		...{ body_sd_normal: found.acrossSd, body_sd_total: found.totalSd },
		alignment_factor: found.alignmentFactor
	};
}

/** Series along (T) and across (P) the solutions, each with the names that cases use for it. */
function describeSeries(trials: number[][], J: Matrix, scales: number[] | undefined) {
	const { along, across } = splitGoalSeries(trials, computeMeanVector(trials), J);
	const [T, P] = [describeOne(along[0] ?? [], scales), describeOne(across[0] ?? [], scales)];
	return {
		...{ lag1_T: T.lag1, lag1_P: P.lag1, dfa_T: T.dfa, dfa_P: P.dfa },
		...{ lag1_delta_T: T.lag1, lag1_delta_P: P.lag1, dfa_delta_T: T.dfa, dfa_delta_P: P.dfa },
		...{ lag1_tangent: T.lag1, lag1_normal: P.lag1, dfa_tangent: T.dfa, dfa_normal: P.dfa },
		...{ sd_T: T.sd, sd_P: P.sd }
	};
}

function describeOne(series: readonly number[], scales: number[] | undefined) {
	return {
		lag1: valueOf(computeLagOne(series)),
		dfa: valueOf(computeFluctuationExponent(series, scales)),
		sd: computeStandardDeviation(series)
	};
}

function valueOf(measure: { ok: true; value: number } | { ok: false }): number | undefined {
	return measure.ok ? measure.value : undefined;
}
