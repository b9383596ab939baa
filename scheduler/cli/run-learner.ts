import { z } from 'zod';
import { FORGETTING_DEFAULTS } from '../learners/forgetting.ts';
import { simulateRewardLearning } from '../learners/reward-learning.ts';
import { computeSingleRateResidual, simulateSingleRate } from '../learners/single-rate.ts';
import {
	computeTwoRateAsymptote,
	simulateTwoRate,
	type TwoRateStep
} from '../learners/two-rate.ts';
import { createSeededStream } from '../random/seeded-stream.ts';

const rate = z.number().gt(0).lt(1);
const retention = z.number().gt(0).max(1);
const numbers = z.array(z.number());
const hours = z.number().nonnegative();

const forgettingSchema = z.discriminatedUnion('kind', [
	z.strictObject({
		kind: z.literal('exponential'),
		timeConstantHours: z.number().positive(),
		floor: z.number().min(0).max(1)
	}),
	z.strictObject({
		kind: z.literal('power'),
		timeScaleHours: z.number().positive(),
		exponent: z.number().positive()
	})
]);

const stepSchema = z.union([
	z.strictObject({ trials: z.number().int().min(1).max(10_000), perturbation: z.number() }),
	z.strictObject({ trials: z.number().int().min(1).max(10_000), clampedError: z.number() }),
	z.strictObject({ gapHours: hours })
]);

const singleSchema = z.strictObject({
	learner: z.literal('single-rate'),
	retention,
	rate,
	perturbations: numbers.min(1).max(100_000),
	motorSd: z.number().nonnegative().default(0),
	seed: z.number().int().default(1)
});
const twoSchema = z.strictObject({
	learner: z.literal('two-rate'),
	fastRetention: retention.default(0.59),
	fastRate: rate.default(0.21),
	slowRetention: retention.default(0.992),
	slowRate: rate.default(0.02),
	forgetting: z
		.strictObject({
			fast: forgettingSchema.default(FORGETTING_DEFAULTS.fast),
			slow: forgettingSchema.default(FORGETTING_DEFAULTS.slow)
		})
		.prefault({}),
	steps: z.array(stepSchema).min(1).max(1000)
});
const rewardSchema = z
	.strictObject({
		learner: z.literal('reward'),
		start: z.number().default(0),
		rate: z.number().gt(0).max(1),
		explore: z.enum(['always', 'after-failure']),
		exploration: numbers.min(1),
		motorNoise: numbers.min(1),
		rewardZone: z.tuple([z.number(), z.number()]),
		wasRewarded: z.boolean().default(false)
	})
	.refine(({ exploration, motorNoise }) => exploration.length === motorNoise.length, {
		error: 'exploration and motorNoise must be of one length',
		path: ['motorNoise']
	});

export const learnInputSchema = z.discriminatedUnion('learner', [
	singleSchema,
	twoSchema,
	rewardSchema
]);

export const learnOutputSchema = z.union([
	z.strictObject({ states: numbers, errors: numbers, residual: z.number() }),
	z.strictObject({
		states: z.array(z.strictObject({ fast: z.number(), slow: z.number(), net: z.number() })),
		settlesAt: z.looseObject({ net: z.number() })
	}),
	z.strictObject({ aims: numbers, rewards: z.array(z.boolean()) })
]);

/** The course of a model learner. */
export function runLearner(input: z.output<typeof learnInputSchema>) {
	switch (input.learner) {
		case 'single-rate':
			return {
				...simulateSingleRate({ ...input, stream: createSeededStream(input.seed) }),
				residual: computeSingleRateResidual({
					...input,
					perturbation: input.perturbations.at(-1) ?? 0
				})
			};
		case 'two-rate':
			return runTwoRate(input);
		case 'reward':
			return simulateRewardLearning(input);
	}
}

function runTwoRate({ steps, forgetting, ...rates }: z.output<typeof twoSchema>) {
	const all = steps.flatMap(listSteps);
	const states = simulateTwoRate({ rates, steps: all, forgetting });
	const last = all.findLast((step) => step.kind === 'trial');
	return {
		states: states.map(({ fast, slow }) => ({ fast, slow, net: fast + slow })),
		settlesAt: computeTwoRateAsymptote(rates, last?.perturbation ?? 1)
	};
}

function listSteps(step: z.output<typeof stepSchema>): TwoRateStep[] {
	if ('gapHours' in step) return [{ kind: 'gap', hours: step.gapHours }];
	const one: TwoRateStep =
		'clampedError' in step
			? { kind: 'clamp', error: step.clampedError }
			: { kind: 'trial', perturbation: step.perturbation };
	return Array.from({ length: step.trials }, () => one);
}
