import type { Tails } from './incomplete-gamma.ts';

/** What {@link solvePositiveQuantile} needs to know of a distribution on the positive numbers. */
export type QuantileProblem = {
	/** Which tail shall hold `probability`. */
	tail: keyof Tails;
	/** Strictly between 0 and 1. */
	probability: number;
	computeTails: (x: number) => Tails;
	computeDensity: (x: number) => number;
	/** Where to start; any positive number is right, a near one is faster. */
	guess: number;
};

/**
 * The point of a positive distribution beyond which (or below which) a given probability lies.
 *
 * Shapes: functions in, number out. Units: those of the distribution's variable.
 * Method: Newton's steps on log probability against log x, kept inside a shrinking bracket.
 * Source: Numerical analysis textbooks (safeguarded Newton). jstat's inverses are not used: they
 * stop at a relative 4e-8.
 * Accuracy: that of the tails; tests/reference/distributions.test.ts.
 * @throws RangeError when the probability is not strictly between 0 and 1
 */
export function solvePositiveQuantile(problem: QuantileProblem): number {
	const { tail, probability, computeTails, computeDensity, guess } = problem;
	if (!(probability > 0 && probability < 1)) {
		throw new RangeError(`probability must lie between 0 and 1, got ${probability}`);
	}
	const goal = Math.log(probability);
	const rises = tail === 'lower';
	let low = -745;
	let high = 709;
	let logX = Math.min(high, Math.max(low, Math.log(guess)));
	for (let round = 0; round < 300; round += 1) {
		const x = Math.exp(logX);
		const mass = computeTails(x)[tail];
		const excess = Math.log(mass) - goal;
		if (excess === 0) return x;
		if (excess > 0 === rises) high = logX;
		else low = logX;
		const slope = ((rises ? 1 : -1) * computeDensity(x) * x) / mass;
		const step = logX - excess / slope;
		const next = step > low && step < high ? step : (low + high) / 2;
		if (Math.abs(next - logX) <= 2e-16 * Math.max(1, Math.abs(logX))) return Math.exp(next);
		logX = next;
	}
	return Math.exp(logX);
}
