import { describe, expect, it } from 'vitest';
import { createSeededStream } from '../random/seeded-stream.ts';
import { drawUniform } from '../random/random-stream.ts';
import { computeRetainedShare, FORGETTING_DEFAULTS } from './forgetting.ts';
import { simulateRewardLearning } from './reward-learning.ts';
import {
	computeSingleRateResidual,
	computeSingleRateState,
	countTrialsToFollow,
	simulateSingleRate
} from './single-rate.ts';
import { computeEasierStep, startStaircase, stepStaircase, type Staircase } from './staircase.ts';
import {
	computeTwoRateAsymptote,
	simulateTwoRate,
	stepTwoRate,
	TWO_RATE_PUBLISHED,
	type TwoRateStep
} from './two-rate.ts';

const trials = (count: number, perturbation: number): TwoRateStep[] =>
	Array.from({ length: count }, () => ({ kind: 'trial', perturbation }));

describe('a learner with one rate', () => {
	const learner = { retention: 0.98, rate: 0.12 };

	it('goes the way of the closed form and keeps the closed form’s residual', () => {
		const perturbations = Array.from({ length: 400 }, () => 2);
		const { states, errors } = simulateSingleRate({ ...learner, perturbations });
		for (const trialCount of [0, 1, 7, 60])
			expect(states[trialCount]).toBeCloseTo(
				computeSingleRateState({ ...learner, perturbation: 2, trialCount }),
				12
			);
		expect(errors.at(-1)).toBeCloseTo(
			computeSingleRateResidual({ ...learner, perturbation: 2 }),
			12
		);
	});

	it('follows 90 % in as many trials as the method sheet says', () => {
		// Method sheet C, case follow-lag: ln .1 / ln(1 − b).
		const rates = [0.05, 0.1, 0.109, 0.15, 0.2, 0.3];
		const wanted = [44.89056748, 21.85434533, 19.95120097, 14.16810399, 10.31885116, 6.455696236];
		rates.forEach((rate, i) =>
			expect(countTrialsToFollow({ retention: 1, rate, share: 0.9 })).toBeCloseTo(wanted[i] ?? 0, 7)
		);
	});

	it('does not draw noise without a stream', () => {
		expect(() => simulateSingleRate({ ...learner, perturbations: [1], motorSd: 1 })).toThrow(
			RangeError
		);
	});
});

describe('a learner with two rates', () => {
	it('comes back by itself under clamped errors after a short reversal', () => {
		// Method sheet C: net .702 in the 100th trial; −.147 at the start of the clamp, +.282 at its trial 9.
		const steps = [...trials(100, 1), ...trials(10, -1)];
		const clamp = Array.from({ length: 10 }, (): TwoRateStep => ({ kind: 'clamp', error: 0 }));
		const states = simulateTwoRate({ rates: TWO_RATE_PUBLISHED, steps: [...steps, ...clamp] });
		const net = states.map(({ fast, slow }) => fast + slow);
		expect(net[99]).toBeCloseTo(0.702, 3);
		expect(net[110]).toBeCloseTo(-0.147, 3);
		expect(net[119]).toBeCloseTo(0.282, 3);
	});

	it('settles where its loop says', () => {
		const { fast, slow } = computeTwoRateAsymptote(TWO_RATE_PUBLISHED, 1);
		const settled = stepTwoRate(
			TWO_RATE_PUBLISHED,
			{ fast, slow },
			{ kind: 'trial', perturbation: 1 }
		);
		expect([settled.fast, settled.slow]).toEqual([
			expect.closeTo(fast, 12),
			expect.closeTo(slow, 12)
		]);
	});

	it('forgets the fast process within hours and keeps most of the slow one for a day', () => {
		const gap = { kind: 'gap', hours: 24 } as const;
		const kept = stepTwoRate(TWO_RATE_PUBLISHED, { fast: 1, slow: 1 }, gap, FORGETTING_DEFAULTS);
		expect(kept.fast).toBeLessThan(1e-12);
		// .2 + .8·e^(−24/120)
		expect(kept.slow).toBeCloseTo(0.854984602, 8);
		expect(
			computeRetainedShare({ kind: 'power', timeScaleHours: 10, exponent: 0.5 }, 30)
		).toBeCloseTo(0.5, 12);
	});
});

describe('a learner who knows only success', () => {
	it('keeps what was rewarded', () => {
		// Method sheet C, case reward-keep.
		const given = {
			start: 0,
			exploration: [0.8, -0.5, 1.2, 0.3, -0.9, 0.6, 1.1, -0.2],
			motorNoise: [0.1, 0.2, -0.3, 0.4, -0.1, 0, 0.2, -0.2],
			rewardZone: [0.5, 2] as const,
			wasRewarded: false
		};
		const always = simulateRewardLearning({ ...given, rate: 1, explore: 'always' });
		expect(always.rewards.map(Number)).toEqual([1, 1, 1, 0, 1, 1, 0, 1]);
		expect(always.aims.at(-1)).toBeCloseTo(1, 12);
		const sparing = simulateRewardLearning({ ...given, rate: 0.7, explore: 'after-failure' });
		expect(sparing.rewards.map(Number)).toEqual([1, 1, 0, 1, 1, 1, 1, 1]);
		expect(sparing.aims.at(-1)).toBeCloseTo(0.77, 12);
	});
});

describe('a staircase', () => {
	it.each<Staircase>([
		{ kind: 'up-down', stepHarder: 0.05 },
		{ kind: 'shrinking', size: 4 },
		{ kind: 'shrinking-at-turns', size: 4 }
	])('of the kind $kind holds its success rate', (staircase) => {
		const stream = createSeededStream(20270405);
		let state = startStaircase(0);
		let hits = 0;
		for (let trial = 0; trial < 20_000; trial++) {
			const success = drawUniform(stream) < 1 / (1 + Math.exp(state.level));
			hits += success && trial >= 2000 ? 1 : 0;
			state = stepStaircase({ staircase, state, success, targetSuccess: 0.7 });
		}
		// Standard error .0034; the shrinking kinds approach slowly.
		expect(hits / 18_000).toBeGreaterThan(0.685);
		expect(hits / 18_000).toBeLessThan(0.715);
	});

	it('has the easier step of the method sheet', () => {
		const steps = [0.5, 0.6, 0.7, 0.75, 0.8].map((targetSuccess) =>
			computeEasierStep({ targetSuccess, stepHarder: 1 })
		);
		expect(steps.map((step) => Math.round(step * 1e6) / 1e6)).toEqual([1, 1.5, 2.333333, 3, 4]);
	});
});
