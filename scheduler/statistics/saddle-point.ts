import { computeStirlingError } from './log-gamma.ts';

/**
 * Poisson weight mean^count exp(-mean) / gamma(count + 1) for any real count, without the loss of
 * digits that exp(count log mean - mean - log gamma) has for large counts.
 *
 * Shapes: two numbers in, number out. Units: none.
 * Method: saddle-point form: Stirling errors and the deviance part.
 * Source: C. Loader, Fast and accurate computation of binomial probabilities (2000).
 * Accuracy: relative 1e-13; tests/reference/distributions.test.ts (through chi-square).
 * @throws RangeError when count is negative or mean is not positive
 * @example computePoissonWeight(2, 3) // 0.2240418
 */
export function computePoissonWeight(count: number, mean: number): number {
	if (!(count >= 0)) throw new RangeError(`count must not be negative, got ${count}`);
	if (!(mean > 0)) throw new RangeError(`mean must be positive, got ${mean}`);
	if (count === 0) return Math.exp(-mean);
	const exponent = -computeStirlingError(count) - computeDeviancePart(count, mean);
	return Math.exp(exponent) / Math.sqrt(2 * Math.PI * count);
}

/** Arguments of {@link computeBinomialWeight}; `failureProbability` = 1 - `successProbability`. */
export type BinomialWeightArguments = {
	successCount: number;
	failureCount: number;
	successProbability: number;
	failureProbability: number;
};

/**
 * Binomial weight for any real positive counts. Both probabilities are asked for, so that one next
 * to 1 keeps the digits of its complement.
 *
 * Shapes: four numbers in, number out. Units: none.
 * Method: saddle-point form.
 * Source: C. Loader, Fast and accurate computation of binomial probabilities (2000).
 * Accuracy: relative 1e-13; tests/reference/distributions.test.ts (through the F distribution).
 * @throws RangeError when a count or a probability is not positive
 * @example // 3 of 5 at one half: 0.3125
 * computeBinomialWeight({
 * 	successCount: 3, failureCount: 2, successProbability: 0.5, failureProbability: 0.5
 * })
 */
export function computeBinomialWeight(options: BinomialWeightArguments): number {
	const {
		successCount: a,
		failureCount: b,
		successProbability: p,
		failureProbability: q
	} = options;
	if (!(a > 0 && b > 0)) throw new RangeError(`counts must be positive, got ${a} and ${b}`);
	if (!(p > 0 && q > 0)) throw new RangeError(`probabilities must be positive, got ${p} and ${q}`);
	const n = a + b;
	const stirling = computeStirlingError(n) - computeStirlingError(a) - computeStirlingError(b);
	const deviance = computeDeviancePart(a, n * p) + computeDeviancePart(b, n * q);
	return Math.exp(stirling - deviance) * Math.sqrt(n / (2 * Math.PI * a * b));
}

/** x log(x / mean) + mean - x, by a series where the three terms would cancel. */
function computeDeviancePart(x: number, mean: number): number {
	const difference = x - mean;
	if (Math.abs(difference) >= 0.1 * (x + mean)) return x * Math.log(x / mean) + mean - x;
	const ratio = difference / (x + mean);
	let sum = difference * ratio;
	let term = 2 * x * ratio;
	for (let j = 1; j < 1000; j += 1) {
		term *= ratio * ratio;
		const next = sum + term / (2 * j + 1);
		if (next === sum) return next;
		sum = next;
	}
	return sum;
}
