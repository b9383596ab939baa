/** Abscissae (-1 to 1) and weights of one rule. */
type Rule = { nodes: readonly number[]; weights: readonly number[] };

const RULE = computeLegendreRule(20);

/** Points and weights that turn an integral into a weighted sum. */
export type WeightedPoints = { points: number[]; weights: number[] };

/**
 * Points and weights for integrals from `low` to `high`.
 *
 * Shapes: ends and count of panels in, 20 points a panel out. Units: those of the ends.
 * Method: Gauss-Legendre rule of 20 points in each of equal panels.
 * Source: Abramowitz and Stegun 25.4.30. jstat and simple-statistics have Simpson's rule only.
 * Accuracy: exact for polynomials of degree 39 in each panel; scheduler/statistics/quadrature.test.ts.
 * @throws RangeError when the ends are not finite or there is no panel
 */
export function spreadPoints(low: number, high: number, panelCount = 1): WeightedPoints {
	if (!Number.isFinite(low) || !Number.isFinite(high) || !(panelCount >= 1))
		throw new RangeError(`no panels from ${low} to ${high}`);
	const half = (high - low) / (2 * panelCount);
	const points: number[] = [];
	const weights: number[] = [];
	for (let panel = 0; panel < panelCount; panel += 1) {
		const middle = low + (2 * panel + 1) * half;
		RULE.nodes.forEach((node, i) => {
			points.push(middle + half * node);
			weights.push(half * (RULE.weights[i] ?? 0));
		});
	}
	return { points, weights };
}

/** Integral of a smooth function; see {@link spreadPoints}. */
export function integrate(
	compute: (x: number) => number,
	{ low, high, panelCount = 1 }: { low: number; high: number; panelCount?: number }
): number {
	const { points, weights } = spreadPoints(low, high, panelCount);
	return points.reduce((sum, x, i) => sum + (weights[i] ?? 0) * compute(x), 0);
}

/**
 * Integral over all real numbers of a smooth function that dies out at both ends.
 *
 * Shapes: function and somewhere inside its hump in, number out.
 * Method: trapezoidal rule, whose error falls faster than any power of the step for such functions;
 * the step is halved until two sums agree; each side ends after `quiet` terms below 1e-18 of the sum.
 * Source: L. Trefethen and J. Weideman, SIAM Review 56 (2014).
 * Accuracy: relative 1e-12; scheduler/statistics/quadrature.test.ts.
 * @throws Error when twelve halvings do not settle it: the function is not of this kind
 */
export function integrateReals(
	compute: (x: number) => number,
	{ centre, step }: { centre: number; step: number }
): number {
	let width = step;
	let sum = sumSteps(compute, centre, width) * width;
	for (let round = 0; round < 12; round += 1) {
		const between = sumSteps(compute, centre + width / 2, width) * width;
		const finer = (sum + between) / 2;
		if (Math.abs(finer - sum) <= 1e-13 * Math.abs(finer)) return finer;
		sum = finer;
		width /= 2;
	}
	throw new Error(`the integral around ${centre} did not settle`);
}

function sumSteps(compute: (x: number) => number, start: number, width: number): number {
	let sum = compute(start);
	for (const direction of [1, -1]) {
		let quiet = 0;
		for (let k = 1; quiet < 4; k += 1) {
			const value = compute(start + direction * k * width);
			sum += value;
			quiet = Math.abs(value) <= 1e-18 * Math.abs(sum) ? quiet + 1 : 0;
		}
	}
	return sum;
}

function computeLegendreRule(count: number): Rule {
	const nodes: number[] = [];
	const weights: number[] = [];
	for (let i = 1; i <= count; i += 1) {
		let x = Math.cos((Math.PI * (i - 0.25)) / (count + 0.5));
		let slope = 1;
		for (let round = 0; round < 100; round += 1) {
			const { value, derivative } = evaluateLegendre(count, x);
			slope = derivative;
			x -= value / derivative;
			if (Math.abs(value / derivative) < 1e-16) break;
		}
		nodes.push(x);
		weights.push(2 / ((1 - x * x) * slope * slope));
	}
	return { nodes, weights };
}

function evaluateLegendre(degree: number, x: number): { value: number; derivative: number } {
	let [before, value] = [1, x];
	for (let k = 2; k <= degree; k += 1)
		[before, value] = [value, ((2 * k - 1) * x * value - (k - 1) * before) / k];
	return { value, derivative: (degree * (x * value - before)) / (x * x - 1) };
}
