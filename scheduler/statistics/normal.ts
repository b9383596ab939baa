import { computeIncompleteGamma } from './incomplete-gamma.ts';

/**
 * Probability that a standard normal value is at or below x.
 *
 * Shapes: number in, number out. Units: standard deviations.
 * Method: incomplete gamma function of x^2 / 2 with shape one half.
 * Source: Abramowitz and Stegun 26.2. simple-statistics' table (off by up to 1e-3) is not used.
 * Accuracy: relative 1e-13 in both tails; tests/reference/distributions.test.ts.
 * @throws RangeError when x is not a number
 * @example computeNormalCdf(1.96) // 0.9750021
 */
export function computeNormalCdf(x: number): number {
	return computeNormalSurvival(-x);
}

/**
 * Probability that a standard normal value is above x.
 *
 * Shapes: number in, number out. Units: standard deviations.
 * Method: see {@link computeNormalCdf}. Source: Abramowitz and Stegun 26.2.
 * Accuracy: relative 1e-13 in both tails; tests/reference/distributions.test.ts.
 * @throws RangeError when x is not a number
 * @example computeNormalSurvival(10) // 7.619853e-24
 */
export function computeNormalSurvival(x: number): number {
	if (Number.isNaN(x)) throw new RangeError('x must be a number');
	const half = computeIncompleteGamma(0.5, (x * x) / 2);
	return x > 0 ? half.upper / 2 : 0.5 + half.lower / 2;
}

/** Density of the standard normal distribution at x. */
export function computeNormalDensity(x: number): number {
	return Math.exp((-x * x) / 2) / Math.sqrt(2 * Math.PI);
}

/** Numerator and denominator of one rational piece, lowest power first. */
type Rational = { top: readonly number[]; bottom: readonly number[] };

const CENTRE: Rational = {
	top: [
		3.387132872796366608, 133.14166789178437745, 1971.5909503065514427, 13731.693765509461125,
		45921.953931549871457, 67265.770927008700853, 33430.575583588128105, 2509.0809287301226727
	],
	bottom: [
		1, 42.313330701600911252, 687.1870074920579083, 5394.1960214247511077, 21213.794301586595867,
		39307.89580009271061, 28729.085735721942674, 5226.495278852545925
	]
};
const SHOULDER: Rational = {
	top: [
		1.42343711074968357734, 4.6303378461565452959, 5.7694972214606914055, 3.64784832476320460504,
		1.27045825245236838258, 0.24178072517745061177, 0.0227238449892691845833,
		7.7454501427834140764e-4
	],
	bottom: [
		1, 2.05319162663775882187, 1.6763848301838038494, 0.68976733498510000455,
		0.14810397642748007459, 0.0151986665636164571966, 5.475938084995344946e-4,
		1.05075007164441684324e-9
	]
};
const TAIL: Rational = {
	top: [
		6.6579046435011037772, 5.4637849111641143699, 1.7848265399172913358, 0.29656057182850489123,
		0.026532189526576123093, 0.0012426609473880784386, 2.71155556874348757815e-5,
		2.01033439929228813265e-7
	],
	bottom: [
		1, 0.59983220655588793769, 0.13692988092273580531, 0.0148753612908506148525,
		7.868691311456132591e-4, 1.8463183175100546818e-5, 1.4215117583164458887e-7,
		2.04426310338993978564e-15
	]
};

/**
 * The standard normal value that a share p of values lies at or below.
 *
 * Shapes: number in, number out. Units: standard deviations.
 * Method: three rational approximations.
 * Source: M. J. Wichura, algorithm AS 241 (PPND16), Applied Statistics 37 (1988). jstat and
 * simple-statistics are not used: off by up to 4e-3 and 1.4e-2.
 * Accuracy: relative 1e-14, p from 1e-300; tests/reference/distributions.test.ts.
 * @throws RangeError when p is not in 0 to 1
 * @example computeNormalQuantile(0.975) // 1.959963984540054
 */
export function computeNormalQuantile(p: number): number {
	if (!(p >= 0 && p <= 1)) throw new RangeError(`p must lie in 0 to 1, got ${p}`);
	if (p === 0) return -Infinity;
	if (p === 1) return Infinity;
	const offset = p - 0.5;
	if (Math.abs(offset) <= 0.425) return offset * evaluate(CENTRE, 0.180625 - offset * offset);
	const root = Math.sqrt(-Math.log(offset < 0 ? p : 1 - p));
	const size = root <= 5 ? evaluate(SHOULDER, root - 1.6) : evaluate(TAIL, root - 5);
	return offset < 0 ? -size : size;
}

function evaluate({ top, bottom }: Rational, x: number): number {
	const horner = (sum: number, coefficient: number) => sum * x + coefficient;
	return top.reduceRight(horner, 0) / bottom.reduceRight(horner, 0);
}
