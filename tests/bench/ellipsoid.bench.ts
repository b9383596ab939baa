import { bench, describe } from 'vitest';
import { computeEllipsoid } from '../../scheduler/variability/compute-ellipsoid.ts';
import { computeNextTrialFactor } from '../../scheduler/variability/ellipsoid-factors.ts';
import { estimateMcd } from '../../scheduler/variability/estimate-mcd.ts';
import { computeCovariance, computeMeanVector } from '../../scheduler/variability/moments.ts';
import { computeToleranceFactor } from '../../scheduler/variability/tolerance-factor.ts';
import { trimOutliers } from '../../scheduler/variability/trim-outliers.ts';
import { tiltedTrials } from '../support/variability/any-trials.ts';

const COUNTS = [60, 500, 5000];
const blocks = COUNTS.map((count) => ({ count, trials: tiltedTrials(count) }));

describe('next-trial ellipsoid', () => {
	for (const { count, trials } of blocks)
		bench(`${count} trials`, () => {
			const request = { trialCount: count, variableCount: 2, probability: 0.9 };
			computeEllipsoid({
				mean: computeMeanVector(trials),
				covariance: computeCovariance(trials),
				factor: computeNextTrialFactor(request)
			});
		});
});

describe('cloud without strays, by trimming', () => {
	for (const { count, trials } of blocks) bench(`${count} trials`, () => void trimOutliers(trials));
});

describe('cloud without strays, closest half', () => {
	for (const { count, trials } of blocks)
		bench(`${count} trials`, () => void estimateMcd(trials), { iterations: 3, time: 200 });
});

describe('tolerance factor', () => {
	for (const { count } of blocks)
		bench(
			`${count} trials`,
			() => {
				const request = { trialCount: count, variableCount: 2, share: 0.9, confidence: 0.95 };
				computeToleranceFactor(request);
			},
			{ iterations: 3, time: 200 }
		);
});
