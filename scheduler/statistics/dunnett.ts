import { findRoot } from './find-root.ts';
import { computeNormalCdf, computeNormalDensity } from './normal.ts';
import { integrate, spreadPoints, type WeightedPoints } from './quadrature.ts';
import { computePoissonWeight } from './saddle-point.ts';

/** Several comparisons that share one control group. */
export type ManyToOne = {
	/**
	 * One for each comparison: correlation of comparisons i and j is loadings[i] · loadings[j].
	 * For group sizes n_i and a control of n_0 it is the root of n_i / (n_i + n_0).
	 */
	loadings: readonly number[];
	/** Degrees of freedom of the common variance; Infinity when it is known. */
	df: number;
	/** 2: a difference either way. 1: only larger than the control. */
	sides: 1 | 2;
};

/** Root of n / (n + control): the loadings of treatments of these sizes against one control. */
export function computeLoadings(treatmentSizes: readonly number[], controlSize: number): number[] {
	return treatmentSizes.map((n) => Math.sqrt(n / (n + controlSize)));
}

/**
 * Probability that all comparisons with one control stay within a critical value when no treatment
 * differs: the multivariate t distribution with product correlation.
 *
 * Shapes: critical value and comparisons in, probability out. Units: standard errors.
 * Method: nested quadrature, over what the comparisons share and over the estimate of the spread.
 * Source: C. Dunnett, JASA 50 (1955); method sheet E. jstat has no multivariate t.
 * Accuracy: absolute 1e-9; tests/reference/statistics-sheet.test.ts, case dunnett-critical.
 * @throws RangeError when a loading is not in 0 to below 1, df is not positive or nothing is compared
 */
export function computeManyToOneCdf(critical: number, comparisons: ManyToOne): number {
	requireComparisons(comparisons);
	const { df } = comparisons;
	if (critical <= 0 && comparisons.sides === 2) return 0;
	const inner = spreadPoints(-9, 9, countPanels(comparisons.loadings));
	if (df === Infinity) return integrateShared(critical, comparisons, inner);
	// Density of u = (estimate / true spread), u² df being chi-square.
	const density = (u: number) => (df * computePoissonWeight(df / 2, (df * u * u) / 2)) / u;
	const spread = 1 / Math.sqrt(2 * df);
	const low = df < 12 ? 1e-12 : Math.max(1e-12, 1 - 9.5 * spread);
	const high = 1 + (df < 12 ? 13 : 10.5) * spread * (df < 3 ? 1.4 : 1);
	return integrate((u) => density(u) * integrateShared(critical * u, comparisons, inner), {
		...{ low, high, panelCount: df < 12 ? 4 : 2 }
	});
}

/**
 * Dunnett's critical value: what the largest of several comparisons with one control may reach.
 *
 * Shapes: error rate and comparisons in, number out. Units: standard errors.
 * Method: root search on {@link computeManyToOneCdf}. Source: C. Dunnett, JASA 50 (1955).
 * Accuracy: absolute 1e-8; tests/reference/statistics-sheet.test.ts, case dunnett-critical.
 * @throws RangeError when alpha is not between 0 and 1, and as {@link computeManyToOneCdf} does
 * @example computeDunnettCritical(0.05, { loadings: [.5, .5].map(Math.sqrt), df: 27, sides: 2 })
 * // 2.3334
 */
export function computeDunnettCritical(alpha: number, comparisons: ManyToOne): number {
	if (!(alpha > 0 && alpha < 1)) throw new RangeError(`alpha must be in 0 to 1, got ${alpha}`);
	requireComparisons(comparisons);
	const excess = (c: number) => computeManyToOneCdf(c, comparisons) - (1 - alpha);
	let high = 4;
	while (excess(high) < 0 && high < 1e6) high *= 2;
	let low = comparisons.sides === 2 ? 0 : -1;
	while (comparisons.sides === 1 && excess(low) > 0 && low > -1e6) low *= 2;
	return findRoot({ compute: excess, low, high, tolerance: 1e-9 });
}

/**
 * Adjusted p value of one comparison among several with one control (single step).
 * @throws RangeError as {@link computeManyToOneCdf} does
 */
export function computeDunnettPValue(t: number, comparisons: ManyToOne): number {
	const size = comparisons.sides === 2 ? Math.abs(t) : t;
	return Math.min(1, Math.max(0, 1 - computeManyToOneCdf(size, comparisons)));
}

/** The nearer a loading is to 1, the sharper what is integrated. */
function countPanels(loadings: readonly number[]): number {
	const sharpest = Math.max(...loadings.map((value) => value / Math.sqrt(1 - value * value)));
	return Math.min(40, Math.max(2, Math.ceil(2.5 * sharpest)));
}

/** The chance with the spread known: an average over the value that the control gives to all. */
function integrateShared(
	critical: number,
	{ loadings, sides }: ManyToOne,
	{ points, weights }: WeightedPoints
): number {
	let sum = 0;
	points.forEach((z, i) => {
		let product = (weights[i] ?? 0) * computeNormalDensity(z);
		for (const loading of loadings) {
			const rest = Math.sqrt(1 - loading * loading);
			const below = computeNormalCdf((critical - loading * z) / rest);
			product *= sides === 1 ? below : below - computeNormalCdf((-critical - loading * z) / rest);
		}
		sum += product;
	});
	return Math.min(1, sum);
}

function requireComparisons({ loadings, df }: ManyToOne): void {
	if (loadings.length === 0) throw new RangeError('there must be at least one comparison');
	if (!loadings.every((value) => value >= 0 && value < 1))
		throw new RangeError('each loading must lie in 0 to below 1');
	if (!(df > 0)) throw new RangeError(`df must be positive, got ${df}`);
}
