import type { DesignCell, ModelSums } from './model-sums.ts';

/** Relative Cholesky factor of the random effects' covariance, lower triangular: [11, 21, 22]. */
export type Theta = readonly [number, number, number];

/** REML: restricted likelihood. ML: full likelihood. */
export type Method = 'REML' | 'ML';

/** Everything that follows from one theta. */
export type Profile = {
	criterion: number;
	/** Weighted residual sum of squares. */
	rss: number;
	/** Fixed effects in the columns of Q, less the least-squares ones. */
	shift: Float64Array;
	/** Lower Cholesky factor of XᵀV⁻¹X, row-major p × p (V relative to the residual variance). */
	lower: Float64Array;
	logDetM: number;
	logDetA: number;
};

/** F = L M⁻¹ Lᵀ and log det M for M = I + Lᵀ G L. */
export function reduceCell(
	[a, b, d]: Theta,
	[g11, g12, g22]: DesignCell['g']
): { f11: number; f12: number; f22: number; logDet: number } {
	const [ga1, ga2] = [g11 * a + g12 * b, g12 * a + g22 * b];
	const m11 = 1 + a * ga1 + b * ga2;
	const m12 = d * ga2;
	const m22 = 1 + g22 * d * d;
	const det = m11 * m22 - m12 * m12;
	return {
		f11: (a * a * m22) / det,
		f12: (a * b * m22 - a * d * m12) / det,
		f22: (b * b * m22 - 2 * b * d * m12 + d * d * m11) / det,
		logDet: Math.log(det)
	};
}

/**
 * -2 log likelihood (restricted or full) with fixed effects and residual variance profiled out.
 *
 * Shapes:  sums of the model and theta in; criterion, coefficients and factors out.
 * Method:  M_i = I + LᵀG_iL, F_i = L M_i⁻¹ Lᵀ; XᵀV⁻¹X = XᵀX - Σ (ZᵀX)ᵀ F (ZᵀX); once for each
 *          kind of design, not for each group.
 * Source:  D. Bates et al., J Stat Softw 67 (2015), the same criterion; power sheet, section 5.
 * Accuracy: about 1e-11 of the criterion; tests/reference/mixed-model.test.ts.
 */
export function computeProfile(sums: ModelSums, theta: Theta, method: Method): Profile {
	const { p, rowCount: n } = sums;
	const A = new Float64Array(p * p);
	const c = new Float64Array(p);
	for (let j = 0; j < p; j += 1) A[j * p + j] = 1;
	let logDetM = 0;
	let yy = sums.yy;
	for (const { count, g, zx, zy, zyzy } of sums.cells) {
		const { f11, f12, f22, logDet } = reduceCell(theta, g);
		logDetM += count * logDet;
		yy -= f11 * zyzy[0] + 2 * f12 * zyzy[1] + f22 * zyzy[2];
		const [fy1, fy2] = [f11 * zy[0] + f12 * zy[1], f12 * zy[0] + f22 * zy[1]];
		for (let j = 0; j < p; j += 1) {
			const [x1, x2] = [zx[j] ?? 0, zx[p + j] ?? 0];
			c[j] = (c[j] ?? 0) - x1 * fy1 - x2 * fy2;
			const [h1, h2] = [count * (f11 * x1 + f12 * x2), count * (f12 * x1 + f22 * x2)];
			for (let k = 0; k <= j; k += 1)
				A[j * p + k] = (A[j * p + k] ?? 0) - h1 * (zx[k] ?? 0) - h2 * (zx[p + k] ?? 0);
		}
	}
	const logDetA = factorise(A, p);
	const shift = solveFactored(A, c, p);
	const rss = Math.max(Number.MIN_VALUE, yy - dotFirst(shift, c, p));
	const logR = sums.upper.reduce((sum, row, j) => sum + 2 * Math.log(Math.abs(row[j] ?? 0)), 0);
	const df = method === 'REML' ? n - p : n;
	const fit = logDetM + df * (1 + Math.log((2 * Math.PI * rss) / df));
	const criterion = method === 'REML' ? fit + logDetA + logR : fit;
	return { criterion, rss, shift, lower: A, logDetM, logDetA: logDetA + logR };
}

/** Cholesky in place, lower triangle; gives the log determinant. */
function factorise(A: Float64Array, p: number): number {
	let logDet = 0;
	for (let i = 0; i < p; i += 1)
		for (let j = 0; j <= i; j += 1) {
			let sum = A[i * p + j] ?? 0;
			for (let k = 0; k < j; k += 1) sum -= (A[i * p + k] ?? 0) * (A[j * p + k] ?? 0);
			if (i === j) {
				const pivot = Math.sqrt(Math.max(sum, 1e-300));
				logDet += 2 * Math.log(pivot);
				A[i * p + i] = pivot;
			} else A[i * p + j] = sum / (A[j * p + j] ?? 1);
		}
	return logDet;
}

function solveFactored(L: Float64Array, c: Float64Array, p: number): Float64Array {
	const x = Float64Array.from(c);
	solveLowerInPlace(L, x, p);
	for (let i = p - 1; i >= 0; i -= 1) {
		let sum = x[i] ?? 0;
		for (let k = i + 1; k < p; k += 1) sum -= (L[k * p + i] ?? 0) * (x[k] ?? 0);
		x[i] = sum / (L[i * p + i] ?? 1);
	}
	return x;
}

/** Replaces x by L⁻¹ x. */
export function solveLowerInPlace(L: Float64Array, x: Float64Array, p: number): void {
	for (let i = 0; i < p; i += 1) {
		let sum = x[i] ?? 0;
		for (let k = 0; k < i; k += 1) sum -= (L[i * p + k] ?? 0) * (x[k] ?? 0);
		x[i] = sum / (L[i * p + i] ?? 1);
	}
}

function dotFirst(a: Float64Array, b: Float64Array, count: number): number {
	let sum = 0;
	for (let i = 0; i < count; i += 1) sum += (a[i] ?? 0) * (b[i] ?? 0);
	return sum;
}
