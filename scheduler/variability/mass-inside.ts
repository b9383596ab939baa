import { computeCholesky, solveLower, whitenMatrix } from '../linear-algebra/cholesky.ts';
import { computeSymmetricEigen } from '../linear-algebra/symmetric-eigen.ts';
import { dot, row, subtract, type Matrix, type Vector } from '../linear-algebra/vector.ts';
import { computeNormalCdf, computeNormalDensity } from '../statistics/normal.ts';
import { computeQuadraticCdf, GAUSS_8, type WeightedSquare } from './quadratic-form.ts';

export type MassInside =
	| { ok: true; probability: number }
	/** Cloud and region differ in size by more than a double can hold. */
	| { ok: false; reason: 'singular-covariance' | 'sizes-too-different' };

/** Each variable beyond the first multiplies the work by 64; more are done by inversion. */
const VARIABLES_MAX = 4;
/** SD beyond which a normal density adds less than 1e-18. */
const REACH = 9;
const PANELS = 8;

/**
 * Probability that a normal execution falls inside an ellipsoid {x: (x − c)ᵀ·A⁻¹·(x − c) ≤ 1}.
 *
 * Shapes:  mean, center (d); covariance, shape (d × d), positive definite; any d.
 * Method:  along common principal axes the last variable is a difference of Φ, the others are
 *          integrated by Gauss-Legendre (64 nodes) over the arc sine of their place; above four
 *          variables Imhof's inversion, see quadratic-form.ts.
 * Source:  method sheet B7; cases mass-shifted, mass-3d (quadrature, Imhof inversion).
 * Accuracy: 1e-9, tests/reference/variability.test.ts.
 */
export function computeMassInside(options: {
	mean: Vector;
	covariance: Matrix;
	center: Vector;
	shape: Matrix;
}): MassInside {
	const region = computeCholesky(options.shape);
	if (!region.ok || !computeCholesky(options.covariance).ok)
		return { ok: false, reason: 'singular-covariance' };
	// In the region's own coordinates the region is the unit ball.
	const { values, vectors } = computeSymmetricEigen(whitenMatrix(region.lower, options.covariance));
	const delta = solveLower(region.lower, subtract(options.mean, options.center));
	const axes = values.map((scale, j) => ({
		scale,
		mean: dot(delta, row(vectors, j)) / Math.sqrt(scale)
	}));
	if (axes.some(({ scale, mean }) => !(scale > 0 && Number.isFinite(mean))))
		return { ok: false, reason: 'sizes-too-different' };
	const isFew = axes.length <= VARIABLES_MAX;
	const probability = isFew ? Math.min(1, integrate(axes, 1)) : computeQuadraticCdf(axes, 1);
	return Number.isFinite(probability)
		? { ok: true, probability }
		: { ok: false, reason: 'sizes-too-different' };
}

/** P(Σ scale·y² ≤ room). */
function integrate([axis, ...others]: readonly WeightedSquare[], room: number): number {
	if (!axis || room <= 0) return 0;
	const half = Math.sqrt(room / axis.scale);
	if (others.length === 0)
		return computeNormalCdf(half - axis.mean) - computeNormalCdf(-half - axis.mean);
	const from = Math.asin(Math.max(-1, Math.min(1, (axis.mean - REACH) / half)));
	const to = Math.asin(Math.max(-1, Math.min(1, (axis.mean + REACH) / half)));
	return integratePanels(from, to, (angle) => {
		const y = half * Math.sin(angle);
		const weight = computeNormalDensity(y - axis.mean) * half * Math.cos(angle);
		return weight * integrate(others, room * Math.cos(angle) ** 2);
	});
}

function integratePanels(from: number, to: number, value: (x: number) => number): number {
	const half = (to - from) / PANELS / 2;
	let sum = 0;
	for (let panel = 0; panel < PANELS; panel++) {
		const middle = from + (2 * panel + 1) * half;
		for (const [node, weight] of GAUSS_8)
			sum += weight * (value(middle - node * half) + value(middle + node * half));
	}
	return sum * half;
}
