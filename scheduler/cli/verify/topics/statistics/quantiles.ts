import { computeBetaQuantile, computeBetaTails } from '../../../../statistics/beta-distribution.ts';
import {
	computeChiSquareCdf,
	computeChiSquareQuantile,
	computeChiSquareSurvival
} from '../../../../statistics/chi-square.ts';
import { computeFQuantile, computeFTails } from '../../../../statistics/f-distribution.ts';
import {
	computeGammaQuantile,
	computeGammaTails
} from '../../../../statistics/gamma-distribution.ts';
import type { Tails } from '../../../../statistics/incomplete-gamma.ts';
import {
	computeNoncentralChiSquareQuantile,
	computeNoncentralChiSquareTails
} from '../../../../statistics/noncentral-chi-square.ts';
import {
	computeNoncentralFQuantile,
	computeNoncentralFTails
} from '../../../../statistics/noncentral-f.ts';
import {
	computeNoncentralTQuantile,
	computeNoncentralTTails
} from '../../../../statistics/noncentral-t.ts';
import {
	computeNormalCdf,
	computeNormalQuantile,
	computeNormalSurvival
} from '../../../../statistics/normal.ts';
import {
	computeStudentTCdf,
	computeStudentTQuantile,
	computeStudentTSurvival
} from '../../../../statistics/student-t.ts';
import { firstOf, OneOf, type Answers, type Topic } from '../../topic.ts';
import { forRows, readNumber, type Row } from './rows.ts';

/** A quantile under the names that cases give it. */
function asQuantile(value: number): Answers {
	return { q: value, x: value, quantile: value };
}

function asTails({ lower, upper }: Tails): Answers {
	return { cdf: lower, p: lower, lower, sf: upper, upper, upper_tail: upper };
}

/** Several topics of the same names: each list of answers counts as a whole. */
function eitherOf(...topics: readonly Topic[]): Topic {
	return (inputs, datasets) => {
		const all = topics.flatMap((topic) => {
			const answers = topic(inputs, datasets);
			return answers ? [answers] : [];
		});
		const [first] = all;
		if (!first) return undefined;
		return Object.fromEntries(
			Object.keys(first).map((name) => [name, new OneOf(...all.map((answers) => answers[name]))])
		);
	};
}

const number = readNumber;
const F = (row: Row) => ({ df1: number(row, 'df1'), df2: number(row, 'df2') });
const noncentral = (row: Row) => ({ df: number(row, 'df'), ncp: number(row, 'ncp') });

/** Names that a point may have; the letter says the distribution where one is usual. */
const POINTS = ['x', 'q', 't', 'f', 'z', 'chisq', 'chi2'] as const;

function atPoint(needed: readonly string[], compute: (x: number, row: Row) => Tails): Topic {
	return forPoint(POINTS, needed, compute);
}

function forPoint(
	points: readonly (typeof POINTS)[number][],
	needed: readonly string[],
	compute: (x: number, row: Row) => Tails
): Topic {
	return firstOf(
		...points.map((point) =>
			forRows({ needed: [point, ...needed] }, (row) => asTails(compute(number(row, point), row)))
		)
	);
}

const chiSquareTails = (x: number, df: number) => ({
	lower: computeChiSquareCdf(x, df),
	upper: computeChiSquareSurvival(x, df)
});
const tTails = (x: number, df: number) => ({
	lower: computeStudentTCdf(x, df),
	upper: computeStudentTSurvival(x, df)
});

/** Quantiles and tails; one df alone may mean chi-square or t, and either answer will do. */
export const QUANTILES: Topic = firstOf(
	eitherOf(
		forRows({ needed: ['p', 'df'] }, (row) =>
			asQuantile(computeChiSquareQuantile(number(row, 'p'), number(row, 'df')))
		),
		forRows({ needed: ['p', 'df'] }, (row) =>
			asQuantile(computeStudentTQuantile(number(row, 'p'), number(row, 'df')))
		)
	),
	forRows({ needed: ['p', 'df1', 'df2'] }, (row) =>
		asQuantile(computeFQuantile(number(row, 'p'), F(row).df1, F(row).df2))
	),
	forRows({ needed: ['p'] }, (row) => asQuantile(computeNormalQuantile(number(row, 'p')))),
	...[['shape1', 'shape2'] as const, ['a', 'b'] as const, ['alpha', 'beta'] as const].flatMap(
		([a, b]) => [
			forRows({ needed: ['p', a, b] }, (row) =>
				asQuantile(computeBetaQuantile(number(row, 'p'), { a: number(row, a), b: number(row, b) }))
			),
			atPoint([a, b], (x, row) => computeBetaTails(x, { a: number(row, a), b: number(row, b) }))
		]
	),
	forRows({ needed: ['p', 'shape'], optional: ['rate'] }, (row) =>
		asQuantile(
			computeGammaQuantile(number(row, 'p'), {
				...{ shape: number(row, 'shape'), rate: number(row, 'rate', 1) }
			})
		)
	),
	eitherOf(
		forRows({ needed: ['p', 'df', 'ncp'] }, (row) =>
			asQuantile(computeNoncentralTQuantile(number(row, 'p'), noncentral(row)))
		),
		forRows({ needed: ['p', 'df', 'ncp'] }, (row) =>
			asQuantile(
				noncentral(row).ncp < 0
					? Number.NaN
					: computeNoncentralChiSquareQuantile(number(row, 'p'), noncentral(row))
			)
		)
	),
	forRows({ needed: ['p', 'df1', 'df2', 'ncp'] }, (row) =>
		asQuantile(computeNoncentralFQuantile(number(row, 'p'), { ...F(row), ncp: number(row, 'ncp') }))
	),
	atPoint(['shape', 'rate'], (x, row) =>
		computeGammaTails(x, { shape: number(row, 'shape'), rate: number(row, 'rate') })
	),
	atPoint(['df1', 'df2', 'ncp'], (x, row) =>
		computeNoncentralFTails(x, { ...F(row), ncp: number(row, 'ncp') })
	),
	atPoint(['df1', 'df2'], (x, row) => computeFTails(x, F(row).df1, F(row).df2)),
	forPoint(['t'], ['df', 'ncp'], (x, row) => computeNoncentralTTails(x, noncentral(row))),
	forPoint(['chisq', 'chi2'], ['df', 'ncp'], (x, row) =>
		computeNoncentralChiSquareTails(x, noncentral(row))
	),
	eitherOf(
		forPoint(['x', 'q'], ['df', 'ncp'], (x, row) => computeNoncentralTTails(x, noncentral(row))),
		forPoint(['x', 'q'], ['df', 'ncp'], (x, row) =>
			noncentral(row).ncp < 0
				? { lower: Number.NaN, upper: Number.NaN }
				: computeNoncentralChiSquareTails(x, noncentral(row))
		)
	),
	forPoint(['t'], ['df'], (x, row) => tTails(x, number(row, 'df'))),
	forPoint(['chisq', 'chi2'], ['df'], (x, row) => chiSquareTails(x, number(row, 'df'))),
	eitherOf(
		forPoint(['x', 'q'], ['df'], (x, row) => chiSquareTails(x, number(row, 'df'))),
		forPoint(['x', 'q'], ['df'], (x, row) => tTails(x, number(row, 'df')))
	),
	forPoint(['x', 'z'], [], (x) => ({ lower: computeNormalCdf(x), upper: computeNormalSurvival(x) }))
);
