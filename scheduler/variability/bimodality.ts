import { entry, type Vector } from '../linear-algebra/vector.ts';
import { computeMean, computeVariance } from './moments.ts';

export interface Split {
	/** Ashman's D of the best split; -1 when no group has any spread. */
	readonly separation: number;
	/** Count of the lower group. */
	readonly lowerCount: number;
}

const GROUP_MIN = 3;
const GROUP_SHARE_MIN = 0.15;

/**
 * Largest separation of a list into two ordered groups: difference of means in pooled SD.
 *
 * Method:  all splits that leave at least 3 values and 15 % on each side; the first of equals.
 * Source:  method sheet D4; Ashman, Bird & Zepf 1994 (D); case policy-gates.
 */
export function findBestSplit(values: Vector): Split {
	const sorted = [...values].sort((a, b) => a - b);
	const least = Math.max(GROUP_MIN, Math.ceil(GROUP_SHARE_MIN * sorted.length));
	let best: Split = { separation: -1, lowerCount: 0 };
	for (let i = least; i <= sorted.length - least; i++) {
		const [lower, upper] = [sorted.slice(0, i), sorted.slice(i)];
		const variance = (computeVariance(lower) + computeVariance(upper)) / 2;
		if (variance <= 0) continue;
		const separation = (computeMean(upper) - computeMean(lower)) / Math.sqrt(variance);
		if (separation > best.separation) best = { separation, lowerCount: i };
	}
	return best;
}

/** Above this a distribution is more bimodal than a uniform one. */
export const BIMODALITY_UNIFORM = 5 / 9;

/**
 * Bimodality coefficient from bias-corrected skewness and kurtosis.
 *
 * Source:  SAS/STAT (G₁, G₂); method sheet D4; case policy-gates.
 * @throws {RangeError} fewer than four values
 */
export function computeBimodalityCoefficient(values: Vector): number {
	const n = values.length;
	if (n < 4) throw new RangeError('computeBimodalityCoefficient requires at least four values');
	const mean = computeMean(values);
	const moment = (power: number) => computeMean(values.map((value) => (value - mean) ** power));
	const skewness = moment(3) / moment(2) ** 1.5;
	const excess = moment(4) / moment(2) ** 2 - 3;
	const G1 = (Math.sqrt(n * (n - 1)) / (n - 2)) * skewness;
	const G2 = ((n - 1) / ((n - 2) * (n - 3))) * ((n + 1) * excess + 6);
	return (G1 ** 2 + 1) / (G2 + (3 * (n - 1) ** 2) / ((n - 2) * (n - 3)));
}

/** 99 % points of the best split of normal samples, by Monte Carlo (case bimodality-null). */
const NULL_99: readonly (readonly [number, number])[] = [
	[20, 4.825],
	[30, 4.194],
	[40, 3.991],
	[60, 3.714]
];

/** Separation that only 1 % of normal samples of this size exceed; straight lines in between. */
export function findSplitLimit(count: number): number {
	const above = NULL_99.findIndex(([n]) => n >= count);
	const [n1, d1] = NULL_99[above] ?? NULL_99[NULL_99.length - 1] ?? [0, 0];
	if (above <= 0) return d1;
	const [n0, d0] = NULL_99[above - 1] ?? [n1, d1];
	return d0 + ((d1 - d0) * (count - n0)) / (n1 - n0);
}

/** Indices of the larger mode of a list, split where the separation is largest. */
export function findLargerMode(values: Vector): number[] {
	const { lowerCount } = findBestSplit(values);
	const order = values
		.map((_, i) => i)
		.sort((a, b) => entry(values, a) - entry(values, b) || a - b);
	const [lower, upper] = [order.slice(0, lowerCount), order.slice(lowerCount)];
	return (lower.length >= upper.length ? lower : upper).sort((a, b) => a - b);
}
