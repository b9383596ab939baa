import { entry } from '../linear-algebra/vector.ts';
import { computeChiSquareCdf, computeChiSquareQuantile } from '../statistics/chi-square.ts';

/** Fits of simulated determinants for the two ends of the share of trials that a subset holds. */
interface FactorFit {
	/** One variable and two variables: [a, b] of 1 − e^a / n^b. */
	readonly few: readonly (readonly [number, number])[];
	/** More variables: [α, β, q] of two points through which a line is laid. */
	readonly many: readonly (readonly [number, number, number])[];
}

const RAW: readonly [FactorFit, FactorFit] = [
	{
		few: [
			[0.262024211897096, 0.604756680630497],
			[0.673292623522027, 0.691365864961895]
		],
		many: [
			[-1.42764571687802, 1.26263336932151, 2],
			[-1.06141115981725, 1.28907991440387, 3]
		]
	},
	{
		few: [
			[-0.351584646688712, 1.01646567502486],
			[0.446537815635445, 1.06690782995919]
		],
		many: [
			[-0.455179464070565, 1.11192541278794, 2],
			[-0.294241208320834, 1.09649329149811, 3]
		]
	}
];
const REWEIGHTED: readonly [FactorFit, FactorFit] = [
	{
		few: [
			[1.11098143415027, 1.5182890270453],
			[3.11101712909049, 1.91401056721863]
		],
		many: [
			[-1.02842572724793, 1.67659883081926, 2],
			[-0.26800273450853, 1.35968562893582, 3]
		]
	},
	{
		few: [
			[-0.66046776772861, 0.88939595831888],
			[0.79473550581058, 1.10081930350091]
		],
		many: [
			[-0.544482443573914, 1.25994483222292, 2],
			[-0.343791072183285, 1.25159004257133, 3]
		]
	}
];
const SHARE_LOW = 0.5;
const SHARE_HIGH = 0.875;

/**
 * Factor that makes the covariance of the share of trials nearest to the center that of all of them,
 * under the normal distribution.
 *
 * Method:  share / F_χ²(d+2)(χ²(d, share)).
 * Source:  Croux & Haesbroeck 1999; method sheet B3 (ii); case mcd-hbk (raw_cnp2, cnp2).
 * @throws {RangeError} share not above 0 or above 1
 */
export function computeConsistencyFactor(share: number, variableCount: number): number {
	if (!(share > 0 && share <= 1)) throw new RangeError(`share must lie in 0 to 1, got ${share}`);
	if (share === 1) return 1;
	const cut = computeChiSquareQuantile(share, variableCount);
	return share / computeChiSquareCdf(cut, variableCount + 2);
}

/** Counts of trials, by variables, up to which the fits of the small-sample factors do not hold. */
const TRIALS_BELOW_FITS = [2, 6, 10, 13, 16, 18, 20, 20, 20];

/** Whether the small-sample factors hold for so many trials of so many variables. */
export function hasSmallSampleFactor(trialCount: number, variableCount: number): boolean {
	return trialCount > (TRIALS_BELOW_FITS[variableCount - 1] ?? 2 * variableCount + 2);
}

/**
 * Factor that takes away the small-sample bias of the minimum covariance determinant.
 *
 * Method:  fits of simulations in n and d, straight lines in the share between .5, .875 and 1.
 *          Where {@link hasSmallSampleFactor} is false they give nonsense.
 * Source:  Pison, Van Aelst & Willems 2002, Metrika 55:111, as used by R robustbase 0.95; case mcd-hbk.
 * @throws {RangeError} share outside .5 to 1
 */
export function computeSmallSampleFactor(options: {
	trialCount: number;
	variableCount: number;
	/** Share of trials a subset holds. */
	share: number;
	/** Of the raw covariance or of the one computed again from the trials that are kept. */
	stage: 'raw' | 'reweighted';
}): number {
	const { trialCount: n, variableCount: d, share, stage } = options;
	if (!(share >= SHARE_LOW && share <= 1))
		throw new RangeError(`share must lie in .5 to 1, got ${share}`);
	const [low, high] = (stage === 'raw' ? RAW : REWEIGHTED).map((fit) => fitAt(fit, n, d));
	const [atLow = 1, atHigh = 1] = [low, high];
	if (share <= SHARE_HIGH)
		return 1 / (atLow + ((atHigh - atLow) * (share - SHARE_LOW)) / (SHARE_HIGH - SHARE_LOW));
	return 1 / (atHigh + ((1 - atHigh) * (share - SHARE_HIGH)) / (1 - SHARE_HIGH));
}

function fitAt({ few, many }: FactorFit, n: number, d: number): number {
	const known = few[d - 1];
	if (known) return 1 - Math.exp(known[0]) / n ** known[1];
	const [left, right] = many.map(([alpha, beta, q]) => ({
		x: -Math.log(q * d * d),
		y: Math.log(-alpha / d ** beta)
	}));
	const [x0, y0, x1, y1] = [left?.x ?? 0, left?.y ?? 0, right?.x ?? 1, right?.y ?? 0];
	const power = (y1 - y0) / (x1 - x0);
	return 1 - Math.exp(y0 - power * x0) / n ** power;
}

/**
 * Trials in a subset of the minimum covariance determinant: from just over half (share .5, withstands
 * the most strays) to all (share 1).
 *
 * Method:  2·⌊(n + d + 1)/2⌋ − n + 2·(n − ⌊(n + d + 1)/2⌋)·share, rounded down.
 * Source:  Rousseeuw & Van Driessen 1999; case mcd-hbk (h).
 */
export function computeSubsetSize(n: number, d: number, share = SHARE_LOW): number {
	const half = Math.floor((n + d + 1) / 2);
	return Math.min(n, Math.floor(2 * half - n + 2 * (n - half) * share + 1e-12));
}

/** C(n, k), as far as a double reaches. */
export function countSubsets(n: number, k: number): number {
	return Array.from({ length: k }, (_, i) => (n - i) / (i + 1)).reduce(
		(product, factor) => product * factor,
		1
	);
}

/** Place-wise next subset of size k of 0 … n − 1 in lexical order; null after the last. */
export function findNextSubset(subset: readonly number[], n: number): number[] | null {
	const k = subset.length;
	for (let i = k - 1; i >= 0; i--) {
		const value = entry(subset, i);
		if (value < n - k + i) return subset.map((old, j) => (j < i ? old : value + 1 + (j - i)));
	}
	return null;
}
