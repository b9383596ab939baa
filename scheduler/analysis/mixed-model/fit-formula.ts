import { computeStudentTQuantile, computeStudentTSurvival } from '../../statistics/student-t.ts';
import { buildModelFrame, type DataColumns } from '../model-formula.ts';
import type { Method } from './criterion.ts';
import { fitMixedModel, type MixedModelFit } from './fit-mixed-model.ts';
import { computeKenwardRoger } from './kenward-roger.ts';
import { createSatterthwaite } from './satterthwaite.ts';

/** One fixed effect with both ways to judge it. */
export type FixedEffect = {
	name: string;
	estimate: number;
	standardError: number;
	satterthwaite: { df: number; t: number; p: number; interval: { lower: number; upper: number } };
	/** Null for a fit by ML, and where the variances are not told by the data. */
	kenwardRoger: { standardError: number; df: number; t: number; p: number } | null;
};

export type FormulaFit =
	| {
			ok: true;
			fit: MixedModelFit;
			fixedEffects: FixedEffect[];
			randomNames: string[];
			groups: string[];
	  }
	| Extract<ReturnType<typeof fitMixedModel>, { ok: false }>;

/**
 * A mixed model from a formula and named columns, with a table of its fixed effects.
 *
 * Shapes:  columns of n values in, effects (p) out. Units: those of the columns.
 * Method:  see `buildModelFrame`, `fitMixedModel`, `createSatterthwaite` and `computeKenwardRoger`.
 * Source:  as there. Accuracy: as there; tests/reference/check-cases.test.ts, topic mixed-model.
 * @throws {RangeError} a formula that cannot be read or has no random term, a level not in 0 to 1
 * @example fitFormula({ formula: 'y ~ day + (1 + day | person)', data, method: 'REML' })
 */
export function fitFormula(options: {
	formula: string;
	data: DataColumns;
	method: Method;
	/** Confidence of the intervals, 0.95 when left out. */
	level?: number;
}): FormulaFit {
	const { formula, data, method, level = 0.95 } = options;
	if (!(level > 0 && level < 1))
		throw new RangeError(`level must be between 0 and 1, got ${level}`);
	const { outcome, fixed, random } = buildModelFrame(formula, data);
	if (!random) throw new RangeError('the formula has no random term, such as (1 | person)');
	const groups = [...new Set(random.groups)];
	const numbers = new Map(groups.map((name, i) => [name, i]));
	const fit = fitMixedModel(
		{
			y: outcome,
			fixed: fixed.map(({ values }) => values),
			random: random.columns.map(({ values }) => values),
			group: random.groups.map((name) => numbers.get(name) ?? -1)
		},
		method
	);
	if (!fit.ok) return fit;
	const names = fixed.map(({ name }) => name);
	const randomNames = random.columns.map(({ name }) => name);
	return { ok: true, fit, fixedEffects: describeEffects(fit, names, level), randomNames, groups };
}

function describeEffects(
	fit: MixedModelFit,
	names: readonly string[],
	level: number
): FixedEffect[] {
	const computeDf = createSatterthwaite(fit.solution);
	const adjusted = fit.method === 'REML' ? computeKenwardRoger(fit.solution) : null;
	return names.map((name, i) => {
		const estimate = fit.coefficients[i] ?? 0;
		const standardError = Math.sqrt(fit.covariance[i]?.[i] ?? 0);
		const contrast = names.map((_, j) => (i === j ? 1 : 0));
		const df = computeDf(contrast);
		const reach = -computeStudentTQuantile((1 - level) / 2, df) * standardError;
		const interval = { lower: estimate - reach, upper: estimate + reach };
		const satterthwaite = { ...judge(estimate, standardError, df), interval };
		if (!adjusted?.ok) return { name, estimate, standardError, satterthwaite, kenwardRoger: null };
		const own = Math.sqrt(adjusted.covariance[i]?.[i] ?? 0);
		const { df: ownDf } = adjusted.test([contrast]);
		const isKnown = ownDf > 0 && Number.isFinite(ownDf);
		const kenwardRoger = isKnown ? { standardError: own, ...judge(estimate, own, ownDf) } : null;
		return { name, estimate, standardError, satterthwaite, kenwardRoger };
	});
}

function judge(estimate: number, standardError: number, df: number) {
	const t = estimate / standardError;
	return { df, t, p: Math.min(1, 2 * computeStudentTSurvival(Math.abs(t), df)) };
}
