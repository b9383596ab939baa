import { z } from 'zod';
import { fitFromStarts, fitLearningCurve } from '../../../learners/fit/fit-curve.ts';
import { createFormulaModel } from '../../../learners/fit/formula-model.ts';
import { describeTrend } from '../../../learners/plateau.ts';
import { simulateRewardLearning } from '../../../learners/reward-learning.ts';
import { countTrialsToFollow } from '../../../learners/single-rate.ts';
import { computeEasierStep } from '../../../learners/staircase.ts';
import { computeTwoRateAsymptote } from '../../../learners/two-rate.ts';
import { listParameterNames } from '../../list-parameter-names.ts';
import { firstOf, forInputs, listSchema, repeat, type TopicGroup } from '../topic.ts';

const numbers = z.array(z.number());

const curve = forInputs(
	z.strictObject({
		t: numbers,
		y: numbers,
		/** A formula over t, for instance A + B*exp(-k*(t-1)). */
		model: z.string(),
		/** Start values by name, where the formula is none of the known forms. */
		start: z.record(z.string(), z.number()).optional()
	}),
	({ t, y, model, start }) => {
		const formula = model.replace(/^\s*y\s*=\s*/, '');
		const names = listParameterNames(formula, 't');
		const starts = start ? [names.map((name) => start[name] ?? 1)] : findStarts(names, t, y);
		if (!starts) return undefined;
		const fit = fitFromStarts({
			model: createFormulaModel({ formula, time: 't', parameters: names }),
			...{ times: t, values: y, starts, level: null }
		});
		if (!fit.ok) throw new RangeError(`the curve cannot be fitted: ${fit.reason}`);
		const { rss, sigma, parameters } = fit;
		const values = parameters.map(({ name, value }) => [name, value]);
		const se = parameters.map(({ standardError }) => standardError);
		return { ...Object.fromEntries(values), rss, sigma, se };
	}
);

/** Start values from the known form that has the same parameters. */
function findStarts(names: readonly string[], times: number[], values: number[]) {
	const kind = names.length === 3 ? 'exponential' : names.length === 5 ? 'two-phase' : null;
	if (!kind) return null;
	const fit = fitLearningCurve({ kind, times, values, level: null });
	if (!fit.ok) return null;
	const known = new Map(fit.parameters.map(({ name, value }) => [name, value]));
	return names.every((name) => known.has(name))
		? [names.map((name) => known.get(name) ?? 1)]
		: null;
}

const trend = forInputs(z.strictObject({ y: numbers }), ({ y }) => {
	const { slope, slopeSe, t, p, residualLagOne, mannKendall, theilSen } = describeTrend(y);
	return {
		...{ slope, slope_se: slopeSe, t, p, resid_lag1: residualLagOne, theil_sen_slope: theilSen },
		mann_kendall_S: mannKendall.S,
		mann_kendall_var: mannKendall.variance,
		mann_kendall_z: mannKendall.z,
		mann_kendall_p: mannKendall.p
	};
});

const followLag = forInputs(
	z.strictObject({ retention: listSchema, gain: listSchema }),
	({ retention, gain }) => ({
		trials_to_90pct: gain.map((rate, i) =>
			countTrialsToFollow({ retention: repeat(retention, gain.length)[i] ?? 1, rate, share: 0.9 })
		)
	})
);

const twoRate = forInputs(
	z.strictObject({
		...{ Af: z.number(), Bf: z.number(), As: z.number(), Bs: z.number() },
		perturbation: z.number()
	}),
	({ Af, Bf, As, Bs, perturbation }) =>
		computeTwoRateAsymptote(
			{ fastRetention: Af, fastRate: Bf, slowRetention: As, slowRate: Bs },
			perturbation
		)
);

const reward = forInputs(
	z.strictObject({
		...{ aim0: z.number(), exploration: numbers, motor_noise: numbers },
		reward_zone: z.tuple([z.number(), z.number()]),
		initial_previous_reward: z.number()
	}),
	(inputs) => {
		const run = (rate: number, explore: 'always' | 'after-failure') => {
			const { aims, rewards } = simulateRewardLearning({
				...{ rate, explore, start: inputs.aim0, exploration: inputs.exploration },
				...{ motorNoise: inputs.motor_noise, rewardZone: inputs.reward_zone },
				wasRewarded: inputs.initial_previous_reward > 0
			});
			return { aim: aims, reward: rewards.map(Number) };
		};
		return { always_lr1: run(1, 'always'), after_failure_lr07: run(0.7, 'after-failure') };
	}
);

const upDown = forInputs(
	z.strictObject({ target_success: listSchema, step_harder: z.number() }),
	({ target_success, step_harder }) => ({
		step_easier: target_success.map((targetSuccess) =>
			computeEasierStep({ targetSuccess, stepHarder: step_harder })
		)
	})
);

/** Learners and learning curves in check cases. */
export const LEARNING_TOPICS: TopicGroup = {
	learning: firstOf(curve, trend),
	learner: firstOf(followLag, twoRate, reward),
	adaptive: upDown
};
