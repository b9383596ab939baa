import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { multiplyVector } from '../linear-algebra/vector.ts';
import { drawNormal } from '../random/random-stream.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import { computeFluctuationExponent, computeLagOne } from './fluctuation-analysis.ts';
import { computeGoalSensitivity, splitGoalSeries } from './goal-sensitivity.ts';
import { computeCovariance, computeMeanVector, computeStandardDeviation } from './moments.ts';
import { anyTrials } from '../../tests/support/variability/any-trials.ts';

const slope = fc.integer({ min: -9, max: 9 });
const anySlopes = fc.tuple(slope, slope, slope).filter((list) => list.some((value) => value !== 0));

describe('computeGoalSensitivity', () => {
	it('one result: its SD is gain times alignment times body SD, and that of the results themselves', () => {
		fc.assert(
			fc.property(anyTrials(3), anySlopes, (trials, slopes) => {
				const found = computeGoalSensitivity(computeCovariance(trials), [slopes]);
				fc.pre(found.ok);
				if (!found.ok) return;
				const results = trials.map((trial) => multiplyVector([slopes], trial)[0] ?? NaN);
				expect(found.goalSd).toBeCloseTo(computeStandardDeviation(results), 8);
				const product = (found.singularValues[0] ?? NaN) * found.alignmentFactor * found.totalSd;
				expect(product).toBeCloseTo(found.goalSd, 8);
			})
		);
	});

	it('says so when the task has no slope or the cloud no spread', () => {
		expect(
			computeGoalSensitivity(
				[
					[1, 0],
					[0, 1]
				],
				[[0, 0]]
			).ok
		).toBe(false);
		expect(
			computeGoalSensitivity(
				[
					[0, 0],
					[0, 0]
				],
				[[1, 0]]
			)
		).toEqual({ ok: false, reason: 'no-spread' });
	});
});

describe('splitGoalSeries', () => {
	it('keeps the length of each deviation', () => {
		fc.assert(
			fc.property(anyTrials(3), anySlopes, (trials, slopes) => {
				const origin = computeMeanVector(trials);
				const { along, across } = splitGoalSeries(trials, origin, [slopes]);
				expect([along.length, across.length]).toEqual([2, 1]);
				trials.forEach((trial, t) => {
					const square = trial.reduce((sum, x, i) => sum + (x - (origin[i] ?? 0)) ** 2, 0);
					const parts = [...along, ...across].reduce((sum, list) => sum + (list[t] ?? NaN) ** 2, 0);
					expect(parts).toBeCloseTo(square, 8);
				});
			})
		);
	});
});

describe('series measures', () => {
	const stream = createSeededStream(17);
	const noise = Array.from({ length: 2000 }, () => drawNormal(stream));
	let last = 0;
	const walk = noise.map((value) => (last += value));

	it('lag-1 of alternating values is near −1, of a slow wave near 1, of noise near 0', () => {
		const at = (series: number[]) => {
			const found = computeLagOne(series);
			return found.ok ? found.value : NaN;
		};
		expect(at(noise.map((_, i) => (i % 2 === 0 ? 1 : -1)))).toBeCloseTo(-1, 2);
		expect(at(noise.map((_, i) => Math.sin(i / 100)))).toBeGreaterThan(0.99);
		expect(Math.abs(at(noise))).toBeLessThan(3 / Math.sqrt(2000));
		// (−1·0 + 0·1) / (1 + 0 + 1), and (−1.5·−.5 − .5·.5 + .5·1.5) / 5.
		expect([at([1, 2, 3]), at([1, 2, 3, 4])]).toEqual([0, 0.25]);
	});

	it('the fluctuation exponent is .5 for noise and 1.5 for a random walk', () => {
		const [ofNoise, ofWalk] = [noise, walk].map((series) => computeFluctuationExponent(series));
		expect(Math.abs((ofNoise?.ok ? ofNoise.value : NaN) - 0.5)).toBeLessThan(0.08);
		expect(Math.abs((ofWalk?.ok ? ofWalk.value : NaN) - 1.5)).toBeLessThan(0.08);
	});

	it('agrees with numpy 2.4.6 (polyfit) on a short series', () => {
		const series = Array.from({ length: 40 }, (_, i) => ((i * 7919) % 31) / 10 + i / 50);
		const found = computeFluctuationExponent(series);
		expect(found.ok && found.value).toBeCloseTo(0.46694142080777373, 9);
	});

	it('do not depend on unit and origin, and say when there are too few trials or no spread', () => {
		const moved = computeFluctuationExponent(noise.slice(0, 60).map((value) => 5 - 3 * value));
		const still = computeFluctuationExponent(noise.slice(0, 60));
		expect(moved.ok && still.ok && moved.value - still.value).toBeCloseTo(0, 9);
		expect(computeFluctuationExponent(noise.slice(0, 31))).toEqual({
			ok: false,
			reason: 'few-trials'
		});
		expect(computeFluctuationExponent(noise.map(() => 1))).toEqual({
			ok: false,
			reason: 'no-spread'
		});
		expect(computeLagOne([1, 1, 1])).toEqual({ ok: false, reason: 'no-spread' });
	});
});
