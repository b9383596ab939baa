import { computeStudentTQuantile, computeStudentTSurvival } from '../statistics/student-t.ts';
import { fitLeastSquares } from './least-squares.ts';
import { testF, type FTest } from './one-way-anova.ts';

export type AncovaOptions = {
	y: readonly number[];
	/** Group of each row, numbered from 0. */
	group: readonly number[];
	/** Covariates, each with one value a row. */
	covariates: readonly (readonly number[])[];
	/** Confidence of the intervals, 0.95 when left out. */
	level?: number;
};

/** A group against group 0, adjusted. */
export type AdjustedDifference = {
	group: number;
	estimate: number;
	standardError: number;
	t: number;
	df: number;
	p: number;
	interval: { lower: number; upper: number };
};

export type AncovaResult =
	| {
			ok: true;
			/** Of the groups, given the covariates. */
			groups: FTest;
			/** Of each covariate, given the groups and the others. */
			covariates: FTest[];
			/** Whether the groups' slopes differ; null when there are too few rows to tell. */
			slopesDiffer: FTest | null;
			differences: AdjustedDifference[];
			/** Means of the groups at the mean covariates. */
			adjustedMeans: number[];
			residualSd: number;
	  }
	| { ok: false; reason: 'collinear' | 'too-few-rows' | 'no-variance' };

/**
 * Comparison of groups adjusted for covariates (analysis of covariance).
 *
 * Shapes: y and groups (n), covariates (c of n) in; tests and adjusted differences out. Units: those
 * of the values.
 * Method: least squares with one line for each group and common slopes; F tests compare this fit with
 * the one that leaves the tested part out.
 * Source: R lm and anova. Accuracy: relative 1e-10; tests/reference/analysis.test.ts.
 * @throws RangeError when lists differ in length, there are fewer than two groups, groups are not
 * numbered from 0 without a gap, or the level is not between 0 and 1
 */
export function analyseCovariance(options: AncovaOptions): AncovaResult {
	const { y, group, covariates, level = 0.95 } = options;
	requireOptions(options);
	const k = Math.max(...group) + 1;
	const n = y.length;
	const centred = covariates.map((values) => {
		const mean = values.reduce((sum, value) => sum + value, 0) / n;
		return values.map((value) => value - mean);
	});
	const ones = y.map(() => 1);
	const dummies = Array.from({ length: k - 1 }, (_, g) =>
		group.map((own) => (own === g + 1 ? 1 : 0))
	);
	const full = fitLeastSquares(y, [ones, ...dummies, ...centred]);
	if (!full.ok) return full;
	const square = full.residualSum / full.df;
	const compare = (columns: readonly (readonly number[])[], df1: number): FTest | null => {
		const less = fitLeastSquares(y, columns);
		if (!less.ok) return null;
		return testF(Math.max(0, less.residualSum - full.residualSum) / df1 / square, df1, full.df);
	};
	const groups = compare([ones, ...centred], k - 1);
	if (!groups || !(full.residualSum > 1e-24 * y.reduce((sum, v) => sum + v * v, 0)))
		return { ok: false, reason: 'no-variance' };
	const slopes = centred.flatMap((values) =>
		dummies.map((dummy) => dummy.map((isIn, i) => isIn * (values[i] ?? 0)))
	);
	const bent = fitLeastSquares(y, [ones, ...dummies, ...centred, ...slopes]);
	const tests = centred.map((_, c) =>
		compare([ones, ...dummies, ...centred.filter((__, other) => other !== c)], 1)
	);
	const [first = 0, ...effects] = full.coefficients;
	const se = full.unscaled.map((row, i) => Math.sqrt(square * (row[i] ?? 0)));
	return {
		ok: true,
		groups,
		covariates: tests.flatMap((test) => (test ? [test] : [])),
		slopesDiffer:
			bent.ok && slopes.length > 0
				? testF(
						Math.max(0, full.residualSum - bent.residualSum) /
							slopes.length /
							(bent.residualSum / bent.df),
						...([slopes.length, bent.df] as const)
					)
				: null,
		differences: dummies.map((_, g) =>
			describe(g + 1, { estimate: effects[g] ?? 0, se: se[g + 1] ?? 0, df: full.df, level })
		),
		adjustedMeans: [first, ...dummies.map((_, g) => first + (effects[g] ?? 0))],
		residualSd: Math.sqrt(square)
	};
}

function describe(
	group: number,
	{ estimate, se, df, level }: { estimate: number; se: number; df: number; level: number }
): AdjustedDifference {
	const t = estimate / se;
	const reach = -computeStudentTQuantile((1 - level) / 2, df) * se;
	const p = Math.min(1, 2 * computeStudentTSurvival(Math.abs(t), df));
	const interval = { lower: estimate - reach, upper: estimate + reach };
	return { group, estimate, standardError: se, t, df, p, interval };
}

function requireOptions({ y, group, covariates, level = 0.95 }: AncovaOptions): void {
	if ([group, ...covariates].some(({ length }) => length !== y.length))
		throw new RangeError('y, group and covariates differ in length');
	if (![...y, ...covariates.flat()].every(Number.isFinite))
		throw new RangeError('every value must be a number');
	const known = new Set(group);
	const good = [...known].every((g) => Number.isInteger(g) && g >= 0 && g < known.size);
	if (!good || known.size < 2)
		throw new RangeError('two or more groups must be numbered from 0 without a gap');
	if (!(level > 0 && level < 1))
		throw new RangeError(`level must be between 0 and 1, got ${level}`);
}
