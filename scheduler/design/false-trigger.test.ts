import { describe, expect, it } from 'vitest';
import { compareWithReference } from '../policies/change-level.ts';
import { POLICY_DEFAULTS } from '../policies/policy-settings.ts';
import { drawNormal } from '../random/random-stream.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import { computeCovariance, computeMeanVector } from '../variability/moments.ts';
import { computeAreaChange, computeFalseChange, computeFalseEscape } from './false-trigger.ts';

const { band, region } = POLICY_DEFAULTS;

describe('the area of the ellipsoid without a true change', () => {
	it('moves by a factor of 1.1 either way in 61 % and falls by a tenth in 29 % of blocks of 60', () => {
		// Published in the requirements of the checker, for independent normal trials.
		const { either, falls } = computeAreaChange({
			...{ trialCount: 60, variableCount: 2, factor: 1.1, fallTo: 0.9 }
		});
		expect(either).toBeCloseTo(0.61, 2);
		expect(falls).toBeCloseTo(0.29, 2);
		const wide = (factor: number) =>
			computeAreaChange({ trialCount: 60, variableCount: 2, factor, fallTo: 0.9 }).either;
		expect(wide(1.2)).toBeCloseTo(0.33, 2);
		expect(wide(1.5)).toBeCloseTo(0.03, 2);
	});

	it('does so also when it is simulated, with two and with three variables', () => {
		const stream = createSeededStream(11);
		for (const variableCount of [2, 3]) {
			const volumes = Array.from({ length: 4000 }, () => {
				const trials = Array.from({ length: 60 }, () =>
					Array.from({ length: variableCount }, () => drawNormal(stream))
				);
				return Math.sqrt(determinant(computeCovariance(trials)));
			});
			const ratios = volumes.slice(1).map((later, i) => later / (volumes[i] ?? 1));
			const falls = ratios.filter((ratio) => ratio < 0.9).length / ratios.length;
			const expected = computeAreaChange({
				trialCount: 60,
				variableCount,
				factor: 1.1,
				fallTo: 0.9
			});
			// Three standard errors of a share of 4000.
			expect(Math.abs(falls - expected.falls)).toBeLessThan(0.025);
		}
	});
});

describe('the chance that the dead band calls chance a change', () => {
	it('keeps the goal with the usual band and misses it with a loose one', () => {
		const chance = (settings: object) =>
			computeFalseChange({ band: { ...band, ...settings }, trialCount: 60, variableCount: 2 });
		expect(chance({})).toBeLessThan(0.005);
		expect(chance({ q1: 0.8 })).toBeGreaterThan(0.05);
		expect(chance({ wander: 0 })).toBeGreaterThan(0.05);
	});

	it.each([
		[0.9, 0.15],
		[0.7, 0.15],
		[0.9, 0]
	])('agrees with the engine’s own comparison at q1 = %f and wander %f', (q1, wander) => {
		const settings = { ...band, q1, q2: 0.99, wander };
		const stream = createSeededStream(5);
		// Place and shape of one block against three, means wandering by .15 SD.
		const runs = 3000;
		let [suspect, strict] = [0, 0];
		for (let run = 0; run < runs; run++) {
			const plain = Array.from({ length: 3 }, () => drawBlock(stream));
			const current = drawBlock(stream);
			const reference = {
				...{ n: 180, r: 0, blocks: 3, mean: average(plain.map(({ mean }) => mean)) },
				cov: averageMatrix(plain.map(({ cov }) => cov))
			};
			const { level } = compareWithReference(reference as never, current as never, settings);
			if (level > 0) suspect++;
			if (level > 1) strict++;
		}
		const [once, twice] = [suspect / runs, strict / runs];
		const simulated = twice + (once - twice) * once;
		const computed = computeFalseChange({ band: settings, trialCount: 60, variableCount: 2 });
		// The formula of the limits is good to a few percent of their size.
		expect(Math.abs(simulated - computed)).toBeLessThan(0.015 + 0.15 * computed);
	});
});

describe('the chance that a region counts as left by people who stay', () => {
	it('is small with the usual rule and large when any lower bound will do', () => {
		expect(computeFalseEscape({ region, stays: [0.1, 0.2] })).toBeLessThan(0.001);
		const loose = { ...region, relativeEscape: 0 };
		// One look at one side of 95 %, three times: at most .143, less for whole trials.
		const chance = computeFalseEscape({ region: loose, stays: [0.2] });
		expect(chance).toBeGreaterThan(0.05);
		expect(chance).toBeLessThan(0.2);
	});
});

function drawBlock(stream: ReturnType<typeof createSeededStream>) {
	const wander = [0, 1].map(() => 0.15 * drawNormal(stream));
	const trials = Array.from({ length: 60 }, () => wander.map((at) => at + drawNormal(stream)));
	return { n: 60, r: 0, mean: computeMeanVector(trials), cov: computeCovariance(trials) };
}

function average(rows: readonly (readonly number[])[]): number[] {
	return (rows[0] ?? []).map(
		(_, i) => rows.reduce((sum, row) => sum + (row[i] ?? 0), 0) / rows.length
	);
}

function averageMatrix(matrices: readonly (readonly (readonly number[])[])[]): number[][] {
	return (matrices[0] ?? []).map((_, i) => average(matrices.map((matrix) => matrix[i] ?? [])));
}

function determinant(m: readonly (readonly number[])[]): number {
	const [first = [], ...rest] = m;
	if (rest.length === 0) return first[0] ?? 0;
	return first.reduce(
		(sum, value, j) =>
			sum +
			(j % 2 === 0 ? 1 : -1) *
				value *
				determinant(rest.map((row) => row.filter((_, i) => i !== j))),
		0
	);
}
