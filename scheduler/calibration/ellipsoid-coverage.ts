import { multiplyMatrices, scaleMatrix, transpose } from '../linear-algebra/matrix.ts';
import { createSeededStreams } from '../random/seeded-stream.ts';
import {
	computeCoverageFactor,
	computeMeanFactor,
	computeNextTrialFactor
} from '../variability/ellipsoid-factors.ts';
import { computeSquaredDistances } from '../variability/mahalanobis.ts';
import { computeMassInside } from '../variability/mass-inside.ts';
import { computeCovariance, computeMeanVector } from '../variability/moments.ts';
import { computeEffectiveCount, estimateLagOne } from '../variability/serial-dependence.ts';
import { computeToleranceFactor } from '../variability/tolerance-factor.ts';
import { writeShare, writeTable } from './markdown-table.ts';
import { drawTrials } from './normal-trials.ts';

const SEED = 31;
const PROBABILITY = 0.9;
const CONFIDENCE = 0.95;

/**
 * How often each ellipsoid holds what it says it holds, in samples of a normal population.
 *
 * Method:  seeded samples; the mean, the next trial and the share of the population inside are judged
 *          against the known population. Goal: .9 for mean and next trial, .95 for the tolerance ellipsoid.
 */
export function calibrateEllipsoids(runs: number): string {
	const settings = [8, 12, 20, 60].flatMap((n) =>
		[2, 3].flatMap((d) => [0, 0.3].map((carry) => ({ n, d, carry })))
	);
	const rows = settings.map((setting) => {
		const { mean, serial, next, tolerance, mass } = judge(setting, runs);
		const { n, d, carry } = setting;
		const counts = [mean, serial, next, tolerance].map((count) => writeShare(count, runs));
		return [n, d, carry, ...counts, (mass / runs).toFixed(3)];
	});
	return writeTable(
		[
			...['trials', 'variables', 'lag-1'],
			...[
				'mean (.9)',
				'mean, effective count (.9)',
				'next trial (.9)',
				'tolerance (.95)',
				'population in the coverage ellipsoid'
			]
		],
		rows
	);
}

function judge({ n, d, carry }: { n: number; d: number; carry: number }, runs: number) {
	const counts = { trialCount: n, variableCount: d };
	const request = { ...counts, probability: PROBABILITY };
	const factors = {
		mean: computeMeanFactor(request),
		next: computeNextTrialFactor(request),
		coverage: computeCoverageFactor(request),
		tolerance: computeToleranceFactor({ ...counts, share: PROBABILITY, confidence: CONFIDENCE })
	};
	const lower = Array.from({ length: d }, (_, i) =>
		Array.from({ length: d }, (_entry, j) => (j > i ? 0 : j === i ? 1 + i : 0.5))
	);
	const population = { mean: new Array<number>(d).fill(1), lower, carry };
	const held = { mean: 0, serial: 0, next: 0, tolerance: 0, mass: 0 };
	for (const stream of createSeededStreams(SEED, 0, runs)) {
		// The next trial is one of the same population, seen on its own.
		const trials = drawTrials(stream, n, population);
		const [next = []] = drawTrials(stream, 1, population);
		const [center, covariance] = [computeMeanVector(trials), computeCovariance(trials)];
		const distances = computeSquaredDistances({
			...{ executions: [population.mean, next], center, covariance }
		});
		const [toMean = Infinity, toNext = Infinity] = distances.ok ? distances.values : [];
		const massOf = (factor: number) => {
			const shape = scaleMatrix(covariance, factor);
			const truth = multiplyMatrices(lower, transpose(lower));
			const mass = computeMassInside({ mean: population.mean, covariance: truth, center, shape });
			return mass.ok ? mass.probability : 0;
		};
		held.mean += toMean <= factors.mean ? 1 : 0;
		const effective = computeEffectiveCount(n, estimateLagOne(transpose(trials)));
		const wider = computeMeanFactor({ ...request, trialCount: Math.max(effective, d + 1) });
		held.serial += toMean <= wider ? 1 : 0;
		held.next += toNext <= factors.next ? 1 : 0;
		held.tolerance += massOf(factors.tolerance) >= PROBABILITY ? 1 : 0;
		held.mass += massOf(factors.coverage);
	}
	return held;
}
