import { z } from 'zod';
import { transpose } from '../../../../linear-algebra/matrix.ts';
import { estimateMcd } from '../../../../variability/estimate-mcd.ts';
import { findMcdSubset } from '../../../../variability/search-mcd-subset.ts';
import { estimateOgk } from '../../../../variability/estimate-ogk.ts';
import { computeMedian } from '../../../../variability/moments.ts';
import { poolWithPrior } from '../../../../variability/pool-covariance.ts';
import {
	computeInterquartileRange,
	estimateQn,
	estimateTau
} from '../../../../variability/scale-estimates.ts';
import {
	shrinkCovariance,
	shrinkCovarianceOracle
} from '../../../../variability/shrink-covariance.ts';
import { computeTrendSlopes, testHalves, testTrend } from '../../../../variability/stationarity.ts';
import { computeMad, trimOutliers } from '../../../../variability/trim-outliers.ts';
import { firstOf, forInputs, HOW_CHECKED, type TopicGroup } from '../../topic.ts';
import { matrix, readTrials, requireOk, trialNames } from './case-inputs.ts';

/** R's mad() rounds its constant. */
const MAD_FACTOR_R = 1.4826;

const share = z.number().gt(0).lt(1);

/** Estimates of one cloud: robust, of few trials, and whether it stands still. */
export const ESTIMATE_TOPICS: TopicGroup = {
	shrinkage: firstOf(
		forInputs(
			z.strictObject({ ...trialNames, covariance_divisor: z.literal('n').default('n') }),
			(inputs, datasets) => shrink(readTrials(inputs, datasets))
		),
		forInputs(
			z.strictObject({ base: matrix, sample: matrix, n: z.number(), nu0: z.number().default(12) }),
			({ base, sample, n, nu0 }) => ({
				pooled_cov: poolWithPrior({ base, sample, trialCount: n, priorWeight: nu0 })
			})
		)
	),
	stationarity: firstOf(
		forInputs(z.strictObject({ ...trialNames, regressor: z.string() }), (inputs, datasets) => {
			const trials = readTrials(inputs, datasets);
			const { statistic, F, df1, df2, probability } = requireOk(testTrend(trials, 0));
			return { wilks: statistic, F, df1, df2, p: probability, slopes: computeTrendSlopes(trials) };
		}),
		forInputs(z.strictObject(trialNames), (inputs, datasets) => {
			const { statistic, F, df1, df2, probability } = requireOk(
				testHalves(readTrials(inputs, datasets), 0)
			);
			return { T2: statistic, F, df1, df2, p: probability };
		})
	),
	robust: firstOf(
		forInputs(
			z.strictObject({
				...trialNames,
				alpha: z.number().min(0.5).max(1),
				h: z.number().optional(),
				reweight_quantile: share
			}),
			({ alpha, h, reweight_quantile, ...inputs }, datasets) =>
				describeMcd(readTrials(inputs, datasets), alpha, h, reweight_quantile)
		),
		forInputs(
			z.strictObject({ ...trialNames, h: z.number(), alpha: z.number().optional() }),
			({ h, ...inputs }, datasets) => describeSubset(readTrials(inputs, datasets), h)
		),
		forInputs(
			z.strictObject({
				...trialNames,
				sigmamu: z.literal('scaleTau2'),
				weight_quantile: share.default(0.9),
				n_iter: z.number().int().positive().default(2)
			}),
			({ weight_quantile: quantile, n_iter: rounds, ...inputs }, datasets) => {
				const cloud = requireOk(estimateOgk(readTrials(inputs, datasets), { quantile, rounds }));
				return {
					...{ weighted_center: cloud.mean, weighted_cov: cloud.covariance },
					...{ center: cloud.rawMean, cov: cloud.rawCovariance },
					outliers_1based: listLeftOut(cloud.kept)
				};
			}
		),
		forInputs(z.strictObject(trialNames), (inputs, datasets) =>
			describeSpread(readTrials(inputs, datasets))
		)
	)
};

function shrink(trials: number[][]) {
	const ledoitWolf = shrinkCovariance(trials);
	const oracle = shrinkCovarianceOracle(trials);
	return {
		sample_cov_n: ledoitWolf.sample,
		...{ lw_shrinkage: ledoitWolf.shrinkage, lw_cov: ledoitWolf.covariance },
		...{ oas_shrinkage: oracle.shrinkage, oas_cov: oracle.covariance }
	};
}

function describeMcd(trials: number[][], alpha: number, h: number | undefined, quantile: number) {
	const cloud = requireOk(estimateMcd(trials, { share: alpha, subsetSize: h, quantile }));
	return {
		...{ center: cloud.mean, cov: cloud.covariance },
		...{ raw_center: cloud.rawMean, raw_cov: cloud.rawCovariance },
		...{ raw_cnp2: cloud.rawFactors, cnp2: cloud.factors },
		crit_log_det_best_subset: cloud.subset.logDeterminant,
		best_subset_1based: cloud.subset.trials.map((trial) => trial + 1),
		outliers_1based: listLeftOut(cloud.kept),
		same_as_deterministic: HOW_CHECKED
	};
}

function describeSubset(trials: number[][], h: number) {
	const subset = findMcdSubset(trials, { subsetSize: h });
	if (!subset) throw new RangeError('singular-covariance');
	const from1 = subset.trials.map((trial) => trial + 1);
	return {
		...{ best_subset_1based: from1, subset_1based: from1 },
		...{ center: subset.mean, cov: subset.covariance },
		...{ raw_center: subset.mean, raw_cov: subset.covariance },
		...{ det: Math.exp(subset.logDeterminant), log_det: subset.logDeterminant },
		crit_log_det_best_subset: subset.logDeterminant
	};
}

/** Spread of each variable by itself, and the cloud that trimming leaves. */
function describeSpread(trials: number[][]) {
	const columns = transpose(trials);
	const trimmed = trimOutliers(trials);
	return {
		median: columns.map((values) => computeMedian(values)),
		'mad_1.4826': columns.map((values) => MAD_FACTOR_R * computeMad(values)),
		iqr_type7: columns.map(computeInterquartileRange),
		qn: columns.map(estimateQn),
		tau: columns.map((values) => estimateTau(values).scale),
		...(trimmed.ok && {
			...{ center: trimmed.mean, cov: trimmed.covariance },
			outliers_1based: listLeftOut(trimmed.kept)
		})
	};
}

function listLeftOut(kept: readonly boolean[]): number[] {
	return kept.flatMap((isKept, i) => (isKept ? [] : [i + 1]));
}
