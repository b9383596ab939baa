import { z } from 'zod';
import { splitRowSpace } from '../../../../linear-algebra/row-space.ts';
import { multiplyVector, type Matrix } from '../../../../linear-algebra/vector.ts';
import {
	computeFluctuationExponent,
	computeLagOne
} from '../../../../variability/fluctuation-analysis.ts';
import {
	computeGoalSensitivity,
	splitGoalSeries
} from '../../../../variability/goal-sensitivity.ts';
import {
	computeCovariance,
	computeMeanVector,
	computeStandardDeviation
} from '../../../../variability/moments.ts';
import { firstOf, forInputs, type TopicGroup } from '../../topic.ts';
import { divisor, matrix, numbers, readTrials, requireOk, trialNames } from './case-inputs.ts';

const withScales = { divisor, scales: numbers.optional() };

/** How spread of executions becomes spread of the result, and series along and across the solutions. */
export const GOAL_TOPICS: TopicGroup = {
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
