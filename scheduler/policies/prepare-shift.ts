import type { ShiftRule } from '../perturbations/shift-rule.ts';
import { computeMean } from '../variability/moments.ts';
import type { BlockParameters } from './policy-memory.ts';
import type { Turn } from './turn.ts';

export type ShiftRefusal =
	| 'FROZEN'
	| 'DAY-TOO-SHORT'
	| 'TOO-FEW-PLAIN'
	| 'TWO-RESULTS'
	/** Every trial had the same result: there is no SD to measure steps in. */
	| 'NO-SPREAD';

/**
 * The rule of a new target shift from the last clean plain blocks: pooled SD, mean, lag-1 and count.
 *
 * Source:  method sheet D3.
 */
export function prepareShift(
	{ memory, settings, state, task }: Turn,
	goalSd: number
): { ok: true; rule: ShiftRule } | { ok: false; reason: ShiftRefusal } {
	const { shift } = settings;
	const n0 = memory.results.reduce((sum, { n }) => sum + n, 0);
	if (memory.done.frozen) return { ok: false, reason: 'FROZEN' };
	if (task.resultCount > 1) return { ok: false, reason: 'TWO-RESULTS' };
	if (state.trialsLeftToday !== null && state.trialsLeftToday < shift.rule.holdMax)
		return { ok: false, reason: 'DAY-TOO-SHORT' };
	if (n0 < shift.minPlain) return { ok: false, reason: 'TOO-FEW-PLAIN' };
	const pool = (valueOf: (result: (typeof memory.results)[number]) => number) =>
		memory.results.reduce((sum, result) => sum + result.n * valueOf(result), 0) / n0;
	const sigma = Math.sqrt(pool(({ fSd }) => fSd ** 2));
	if (!(sigma > 0)) return { ok: false, reason: 'NO-SPREAD' };
	return {
		ok: true,
		rule: {
			...shift.rule,
			...{ sigma, goal: goalSd * sigma, n0 },
			bias: -pool(({ fMean }) => fMean),
			r: computeMean(memory.results.map(({ r }) => r)),
			hit0: Math.min(
				1,
				pool(({ hit }) => hit)
			)
		}
	};
}

/** What the rig needs to run the rule from its start. */
export function createShiftParameters(rule: ShiftRule): BlockParameters {
	return {
		...{ rule, level: 0, granularity: rule.granularity },
		firstStep: Math.min(rule.firstStepSd, rule.stepCapSd) * rule.sigma,
		step: Math.min(rule.stepSd, rule.stepCapSd) * rule.sigma
	};
}
