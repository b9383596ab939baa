import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { computeSymmetricEigen } from '../../scheduler/linear-algebra/symmetric-eigen.ts';
import { chooseNextBlock } from '../../scheduler/policies/choose-next-block.ts';
import { computeEllipsoid } from '../../scheduler/variability/compute-ellipsoid.ts';
import {
	computeCoverageFactor,
	computeMeanFactor,
	computeNextTrialFactor
} from '../../scheduler/variability/ellipsoid-factors.ts';
import { computeSquaredDistances } from '../../scheduler/variability/mahalanobis.ts';
import {
	computeCovariance,
	computeMeanVector,
	computeMedian
} from '../../scheduler/variability/moments.ts';
import { computeMad, MAD_TO_SD } from '../../scheduler/variability/trim-outliers.ts';
import { expectNumbers } from './expect-numbers.ts';

/** Real reaches; expected values by R 4.2.2, see tests/data/README.md and PROVENANCE.md. */
const folder = new URL('../data/reach_clamp/', import.meta.url);
const cloudSchema = z.object({
	n: z.number(),
	mean: z.record(z.string(), z.number()),
	covariance_n_minus_1: z.array(z.array(z.number())),
	eigenvalues: z.array(z.number()),
	axes_columns_sign_largest_component_positive: z.array(z.array(z.number())),
	chi2_scale: z.record(
		z.string(),
		z.object({ quantile: z.number(), semi_axes: z.array(z.number()), content: z.number() })
	),
	f_scale_prediction_95: z.number(),
	f_scale_mean_95: z.number(),
	mahalanobis_sq_max: z.number(),
	n_beyond_chi2_975: z.number(),
	median: z.record(z.string(), z.number()),
	'mad_1.4826': z.record(z.string(), z.number())
});
const blockSchema = z.object({ all3: cloudSchema, pair_angle_distance: cloudSchema });
const expected = z
	.object({
		ellipsoids: z.record(
			z.string(),
			z.object({ baseline_block2: blockSchema, late_clamp_block6: blockSchema })
		)
	})
	.parse(JSON.parse(readFileSync(new URL('expected.json', folder), 'utf8')));

const [header = [], ...rows] = readFileSync(new URL('reach_clamp_e2.csv', folder), 'utf8')
	.trim()
	.split(/\r?\n/)
	.map((line) => line.split(','));

/** Complete trials of a block within 90 degrees, the variables in the order of `names`. */
function readTrials(participant: string, block: string, names: string[]): number[][] {
	const at = (name: string) => header.indexOf(name);
	return rows
		.filter((row) => row[at('participant')] === participant && row[at('block')] === block)
		.filter((row) => Math.abs(Number(row[at('hand_angle_deg')])) <= 90)
		.filter((row) => names.every((name) => row[at(name)] !== ''))
		.map((row) => names.map((name) => Number(row[at(name)])));
}

const clouds = Object.entries(expected.ellipsoids).flatMap(([participant, blocks]) =>
	Object.entries(blocks).flatMap(([name, block]) =>
		Object.entries(block).map(([variables, wanted]) => ({ participant, name, variables, wanted }))
	)
);
/** Printed with 12 digits. */
const PRINTED = { rel: 1e-8 };

describe('ellipsoids of real reaches against R', () => {
	it.each(clouds)('$participant, $name, $variables', ({ participant, name, wanted }) => {
		const names = Object.keys(wanted.mean);
		const trials = readTrials(participant, name === 'baseline_block2' ? '2' : '6', names);
		expect(trials).toHaveLength(wanted.n);
		const mean = computeMeanVector(trials);
		const covariance = computeCovariance(trials);
		expectNumbers(mean, Object.values(wanted.mean), { rel: 1e-6 });
		expectNumbers(covariance, wanted.covariance_n_minus_1, PRINTED);
		const { values, vectors } = computeSymmetricEigen(covariance);
		expectNumbers([...values].reverse(), wanted.eigenvalues, PRINTED);
		const columns = names.map((_, i) => [...vectors].reverse().map((vector) => vector[i]));
		expectNumbers(columns, wanted.axes_columns_sign_largest_component_positive, { abs: 1e-7 });
		expectFactors(mean, covariance, wanted);
		expectDistances(trials, wanted);
		const axes = names.map((_, i) => trials.map((trial) => trial[i] ?? NaN));
		expectNumbers(axes.map(computeMedian), Object.values(wanted.median), PRINTED);
		const spreads = axes.map((axis) => MAD_TO_SD * computeMad(axis));
		// R rounds the factor to 1.4826.
		expectNumbers(spreads, Object.values(wanted['mad_1.4826']), { rel: 2e-6 });
	});
});

function expectFactors(
	mean: number[],
	covariance: number[][],
	wanted: z.output<typeof cloudSchema>
): void {
	const counts = { trialCount: wanted.n, variableCount: mean.length };
	for (const [level, scale] of Object.entries(wanted.chi2_scale)) {
		const factor = computeCoverageFactor({ ...counts, probability: Number(level) });
		expectNumbers(factor, scale.quantile, PRINTED);
		const { halfAxes, volume } = computeEllipsoid({ mean, covariance, factor });
		expectNumbers(halfAxes, scale.semi_axes, PRINTED);
		expectNumbers(volume, scale.content, PRINTED);
	}
	const nextTrial = computeNextTrialFactor({ ...counts, probability: 0.95 });
	expectNumbers(nextTrial, wanted.f_scale_prediction_95, PRINTED);
	const ofMean = computeMeanFactor({ ...counts, probability: 0.95 });
	expectNumbers(ofMean, wanted.f_scale_mean_95, PRINTED);
}

function expectDistances(trials: number[][], wanted: z.output<typeof cloudSchema>): void {
	const found = computeSquaredDistances({
		executions: trials,
		center: computeMeanVector(trials),
		covariance: computeCovariance(trials)
	});
	const distances = found.ok ? found.values : [];
	expectNumbers(Math.max(...distances), wanted.mahalanobis_sq_max, PRINTED);
	const variableCount = trials[0]?.length ?? 0;
	const limit = computeCoverageFactor({ variableCount, probability: 0.975 });
	expect(distances.filter((value) => value > limit)).toHaveLength(wanted.n_beyond_chi2_975);
}

describe('the selector on real reaches', () => {
	it.each(['B01', 'B07', 'B20'])(
		'gives %s a region among two free directions, or says what the gates found',
		(person) => {
			const names = ['hand_angle_deg', 'peak_radial_velocity_mm_s', 'max_radial_distance_mm'];
			const trials = readTrials(person, '2', names);
			const [angle, speed, distance] = [
				{ min: -180, max: 180, origin: 0, scale: 5 },
				{ min: 0, max: 3000, origin: 550, scale: 130 },
				{ min: 0, max: 400, origin: 120, scale: 20 }
			];
			const decision = chooseNextBlock({
				state: { day: 0, blockInDay: 1, last: { kind: 'baseline', trials } },
				protocol: { settle: { minBlocks: 1, maxBlocks: 1 } },
				task: {
					...{ type: 'formula', formula: 'hand_angle_deg', tolerance: 5, resultUnit: 'deg' },
					variables: [
						{ ...angle, name: 'hand_angle_deg', unit: 'deg' },
						{ ...speed, name: 'peak_radial_velocity_mm_s', unit: 'mm/s' },
						{ ...distance, name: 'max_radial_distance_mm', unit: 'mm' }
					]
				}
			});
			if (decision.kind !== 'region') {
				expect(decision.kind).toBe('practice');
				expect(decision.facts.gates?.codes).not.toEqual(['OK']);
				return;
			}
			expect(decision.facts.aims?.refused).toEqual({ shift: 'TOO-FEW-PLAIN' });
			const { region } = decision.parameters;
			// The exit keeps the hand angle on the target; only speed and distance differ.
			expect(Math.abs(region?.exitInUnits?.[0] ?? NaN)).toBeLessThan(1e-6);
			expect(region?.nearestSuccess).toBeGreaterThanOrEqual(0.5);
			expect(region?.reachSd).toBeLessThanOrEqual(4);
		}
	);
});
