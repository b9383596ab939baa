import { z } from 'zod';
import { compileValue } from '../../../../tasks/formula/compile-formula.ts';
import { parseFormula } from '../../../../tasks/formula/parse-formula.ts';
import { createTetheredBall } from '../../../../tasks/models/tether/tethered-ball.ts';
import { decomposeImprovement } from '../../../../variability/decompose-improvement.ts';
import { computeCovariationIndex, type Cost } from '../../../../variability/mean-cost.ts';
import { computeVariabilityCosts } from '../../../../variability/variability-costs.ts';
import { firstOf, forInputs, readNumbers, type Datasets, type TopicGroup } from '../../topic.ts';
import { tetherInputs, toTetherRecord } from '../task-models/tether.ts';
import { requireOk, trialNames } from './case-inputs.ts';

const ranges = z.array(z.tuple([z.number(), z.number()]));

/** What made one block better than another, and what one block could still gain. */
export const IMPROVEMENT_TOPICS: TopicGroup = {
	tnc: firstOf(
		forInputs(
			z.strictObject({ block1: z.string(), block2: z.string(), result: z.string() }),
			({ block1, block2, result }, datasets) =>
				describeParts(
					readNumbers(datasets, block1),
					readNumbers(datasets, block2),
					readResult(result, listColumns(datasets, block1))
				)
		),
		forInputs(
			z.strictObject({ ...trialNames, result: z.string() }),
			({ result, dataset, columns }, datasets) => {
				const trials = readNumbers(datasets, dataset, columns);
				const cost = readResult(result, columns ?? listColumns(datasets, dataset));
				const found = requireOk(computeCovariationIndex(trials, cost));
				return {
					var_result: found.resultVariance,
					var_result_perm: found.freeVariance,
					R_generalised: found.index
				};
			}
		),
		forInputs(
			z.strictObject({
				...{ task: tetherInputs, block1: z.string(), block2: z.string() },
				result: z.string().optional()
			}),
			({ task, block1, block2 }, datasets) =>
				describeParts(
					readNumbers(datasets, block1),
					readNumbers(datasets, block2),
					costOfThrow(task)
				)
		),
		forInputs(
			z.strictObject({ ...trialNames, result: z.string(), bounds: ranges }),
			({ result, dataset, columns, bounds }, datasets) => {
				const names = columns ?? listColumns(datasets, dataset);
				const trials = readNumbers(datasets, dataset, columns);
				return describeCosts(trials, readResult(result, names), bounds);
			}
		),
		forInputs(
			z.strictObject({
				...{ ...trialNames, task: tetherInputs, bounds: ranges },
				result: z.string().optional()
			}),
			({ task, dataset, columns, bounds }, datasets) =>
				describeCosts(readNumbers(datasets, dataset, columns), costOfThrow(task), bounds)
		)
	)
};

function describeCosts(
	trials: number[][],
	cost: Cost,
	bounds: readonly (readonly [number, number])[]
) {
	const ranges = bounds.map(([min, max]) => ({ min, max }));
	const costs = requireOk(computeVariabilityCosts(trials, cost, { ranges }));
	return {
		D: costs.mean,
		...{ T_cost: costs.tolerance, N_cost: costs.noise, C_cost: costs.covariation }
	};
}

/** Distance at which a throw passes, or the penalty of a ball on the post. */
function costOfThrow(task: z.output<typeof tetherInputs>): Cost {
	const { evaluate } = createTetheredBall(toTetherRecord(task));
	return (execution) => Math.abs(evaluate(execution));
}

function describeParts(before: number[][], after: number[][], cost: Cost) {
	const parts = requireOk(decomposeImprovement(before, after, cost));
	return {
		...{ D1: parts.before, D2: parts.after, D1_perm: parts.beforeFree, D2_perm: parts.afterFree },
		...{ D_shift: parts.shifted, total: parts.total },
		...{ dT: parts.shiftFirst.tolerance, dN: parts.shiftFirst.noise, dC: parts.covariation },
		...{ order2_dT: parts.spreadFirst.tolerance, order2_dN: parts.spreadFirst.noise },
		...{ shapley_dT: parts.shapley.tolerance, shapley_dN: parts.shapley.noise }
	};
}

function listColumns(datasets: Datasets, name: string): string[] {
	return datasets[name]?.columns ?? [];
}

/** A formula in the names of the columns; bars around all of it stand for its absolute value. */
function readResult(text: string, names: readonly string[]): Cost {
	const bars = /^\s*\|([^|]*)\|\s*$/.exec(text);
	const formula = bars ? `abs(${bars[1] ?? ''})` : text;
	const parsed = parseFormula(formula, [...names]);
	if (!parsed.ok)
		throw new RangeError(`formula, character ${parsed.position + 1}: ${parsed.message}`);
	return compileValue(parsed.expression);
}
