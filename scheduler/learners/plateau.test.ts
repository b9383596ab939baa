import { describe, expect, it } from 'vitest';
import { drawNormal } from '../random/random-stream.ts';
import { createSeededStream } from '../random/seeded-stream.ts';
import { describeTrend, judgePlateau } from './plateau.ts';

const blocks = (means: number[], sd = 1) => means.map((mean) => ({ mean, sd, trialCount: 60 }));

describe('describeTrend', () => {
	it('gives the numbers of R on the series of the method sheet', () => {
		// Case plateau-slope: R 4.2 lm; Mann-Kendall with ties and continuity; median of slopes.
		const y = [0.36, 0.39, 0.35, 0.33, 0.37, 0.32, 0.3, 0.34, 0.31, 0.28];
		y.push(0.3, 0.29, 0.26, 0.3, 0.27, 0.28, 0.25, 0.27, 0.26, 0.25);
		const trend = describeTrend(y);
		expect(trend.slope).toBeCloseTo(-0.00633082706766917, 14);
		expect(trend.slopeSe).toBeCloseTo(0.000709596355610571, 14);
		expect(trend.t).toBeCloseTo(-8.92172996325752, 9);
		expect(trend.p).toBeCloseTo(5.01494647659197e-8, 14);
		expect(trend.residualLagOne).toBeCloseTo(-0.304384870636959, 10);
		expect(trend.mannKendall).toMatchObject({ S: -145, variance: expect.closeTo(942.3333333, 6) });
		expect(trend.mannKendall.p).toBeCloseTo(2.71947879357216e-6, 12);
		expect(trend.theilSen).toBeCloseTo(-0.0063961038961039, 14);
	});

	it('keeps its numbers finite on a straight line and on a constant', () => {
		for (const series of [
			[1, 2, 3, 4],
			[5, 5, 5, 5, 5]
		])
			expect(JSON.stringify(describeTrend(series))).not.toMatch(/null/);
		expect(describeTrend([5, 5, 5, 5, 5]).mannKendall.p).toBe(1);
	});
});

describe('judgePlateau', () => {
	it('needs five blocks, a hundred trials and a spread', () => {
		expect(judgePlateau({ blocks: blocks([1, 1, 1, 1]) })).toEqual({
			...{ ok: false, reason: 'too-few-blocks' }
		});
		const short = blocks([1, 1, 1, 1, 1]).map((block) => ({ ...block, trialCount: 10 }));
		expect(judgePlateau({ blocks: short })).toMatchObject({ reason: 'too-few-trials' });
		expect(judgePlateau({ blocks: blocks([1, 1, 1, 1, 1], 0) })).toMatchObject({
			reason: 'no-spread'
		});
	});

	it('calls a steady fall improving, a steady rise worsening and a level line a plateau', () => {
		expect(judgePlateau({ blocks: blocks([3, 2.5, 2, 1.5, 1, 0.6]) })).toMatchObject({
			verdict: 'improving'
		});
		expect(judgePlateau({ blocks: blocks([1, 1.5, 2, 2.5, 3, 3.6]) })).toMatchObject({
			verdict: 'worsening'
		});
		expect(judgePlateau({ blocks: blocks([1, 1.01, 0.99, 1, 1.01, 0.99]) })).toMatchObject({
			verdict: 'plateau'
		});
	});

	it('does not take a wide scatter for a plateau', () => {
		expect(judgePlateau({ blocks: blocks([1, 2, 0.5, 1.8, 0.7, 1.4], 0.8) })).toMatchObject({
			verdict: 'undecided'
		});
	});

	it('calls a person who still learns a plateau in at most one of twenty series', () => {
		const stream = createSeededStream(7);
		const count = 2000;
		// The change lies exactly at the margin: .25 SD over the blocks.
		const wrong = Array.from({ length: count }, () => {
			const means = Array.from({ length: 8 }, (_, i) => {
				return (-0.25 / 8) * i + drawNormal(stream) / Math.sqrt(600);
			});
			return judgePlateau({ blocks: blocks(means) });
		}).filter((found) => found.ok && found.verdict === 'plateau').length;
		// One side of a 90 % interval, three standard errors above .05.
		expect(wrong / count).toBeLessThan(0.065);
	});
});
