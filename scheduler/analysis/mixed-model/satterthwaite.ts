import { computeSymmetricEigen } from '../../linear-algebra/symmetric-eigen.ts';
import { cell, dot, entry, multiplyVector, quadraticForm } from '../../linear-algebra/vector.ts';
import { computeProfile, reduceCell, type Theta } from './criterion.ts';
import { invertFactored, toSolutionContrast, type Solution } from './fit-mixed-model.ts';
import { computeSlopes, toThetaGradient } from './gradient.ts';

/** What the degrees of freedom of any contrast are computed from. */
type Spread = {
	/** Covariance of the coefficients (of Q), p × p. */
	covariance: number[][];
	/** Its derivatives by theta (one or three) and by the log of the residual variance. */
	derivatives: number[][][];
	/** Asymptotic covariance of those parameters. */
	parameterCovariance: number[][];
};

/**
 * Satterthwaite's degrees of freedom of a contrast of fixed effects.
 *
 * Shapes:  fit and contrast (p) in, number out. Units: none.
 * Method:  2 (cᵀVc)² / (gᵀAg): g the gradient of cᵀVc by the variance parameters, A twice the inverse
 *          Hessian of the criterion, by central differences of its exact gradient; a direction
 *          without curvature (a variance at 0) is left out.
 * Source:  F. Satterthwaite, Biometrics Bull 2 (1946); A. Kuznetsova et al., J Stat Softw 82 (2017).
 * Accuracy: relative 1e-3 of lmerTest; tests/reference/mixed-model.test.ts.
 * @throws {RangeError} a contrast of another length, or of zeros
 */
export function createSatterthwaite(solution: Solution): (contrast: readonly number[]) => number {
	const { sums } = solution;
	const spread = computeSpread(solution);
	return (contrast) => {
		if (contrast.length !== sums.p || contrast.every((value) => value === 0))
			throw new RangeError(`a contrast needs ${sums.p} numbers, not all 0`);
		const c = toSolutionContrast(sums, contrast);
		const variance = quadraticForm(spread.covariance, c);
		const gradient = spread.derivatives.map((derivative) => quadraticForm(derivative, c));
		return (2 * variance * variance) / quadraticForm(spread.parameterCovariance, gradient);
	};
}

function computeSpread(solution: Solution): Spread {
	const { sums, at, residualVariance } = solution;
	const inverse = invertFactored(at.profile.lower, sums.p);
	const covariance = inverse.map((row) => row.map((value) => value * residualVariance));
	const derivatives = listTheta(sums.q).map((k) => differentiate(solution, inverse, k));
	return {
		covariance,
		derivatives: [...derivatives, covariance],
		parameterCovariance: invertCurved(computeHessian(solution)).map((row) =>
			row.map((value) => 2 * value)
		)
	};
}

function listTheta(q: 1 | 2): (0 | 1 | 2)[] {
	return q === 1 ? [0] : [0, 1, 2];
}

/** d V / d theta_k = σ² A⁻¹ [Σ Bᵀ (dD / d theta_k) B] A⁻¹ with B = T ZᵀX. */
function differentiate(solution: Solution, inverse: number[][], k: 0 | 1 | 2): number[][] {
	const { sums, at, residualVariance } = solution;
	const [e11, e12, e22] = differentiateD(at.theta, k);
	const { p } = sums;
	const middle = Array.from({ length: p }, () => new Array<number>(p).fill(0));
	for (const { count, g, zx } of sums.cells) {
		const [b1, b2] = multiplyT(at.theta, g, zx, p);
		for (let i = 0; i < p; i += 1) {
			const [h1, h2] = [
				count * (e11 * entry(b1, i) + e12 * entry(b2, i)),
				count * (e12 * entry(b1, i) + e22 * entry(b2, i))
			];
			const row = middle[i];
			if (row)
				for (let j = 0; j < p; j += 1)
					row[j] = (row[j] ?? 0) + h1 * entry(b1, j) + h2 * entry(b2, j);
		}
	}
	return inverse.map((left) => {
		const half = multiplyVector(middle, left);
		return inverse.map((right) => residualVariance * dot(half, right));
	});
}

/** T ZᵀX, its two rows. */
export function multiplyT(
	theta: Theta,
	g: [number, number, number],
	zx: Float64Array,
	p: number
): [number[], number[]] {
	const { f11, f12, f22 } = reduceCell(theta, g);
	const [g11, g12, g22] = g;
	const [t11, t12] = [1 - g11 * f11 - g12 * f12, -g11 * f12 - g12 * f22];
	const [t21, t22] = [-g12 * f11 - g22 * f12, 1 - g12 * f12 - g22 * f22];
	const [b1, b2]: [number[], number[]] = [[], []];
	for (let j = 0; j < p; j += 1) {
		const [x1, x2] = [zx[j] ?? 0, zx[p + j] ?? 0];
		b1.push(t11 * x1 + t12 * x2);
		b2.push(t21 * x1 + t22 * x2);
	}
	return [b1, b2];
}

/** d (L Lᵀ) / d theta_k as [11, 12, 22]. */
function differentiateD([a, b, d]: Theta, k: 0 | 1 | 2): [number, number, number] {
	if (k === 0) return [2 * a, b, 0];
	if (k === 1) return [0, a, 2 * b];
	return [0, 0, 2 * d];
}

/** Of the criterion before profiling, by theta and the log of the residual variance. */
function computeHessian({ sums, at, residualVariance, method }: Solution): number[][] {
	const indices = listTheta(sums.q);
	const gradientAt = (theta: Theta) => {
		const profile = computeProfile(sums, theta, method);
		const { logDets, rssFall } = computeSlopes(sums, { theta, profile, method });
		const slope = logDets.map((value, i) => value - (rssFall[i] ?? 0) / residualVariance);
		return toThetaGradient([slope[0] ?? 0, slope[1] ?? 0, slope[2] ?? 0], theta);
	};
	const { rssFall } = computeSlopes(sums, { ...at, method });
	const fall = toThetaGradient(rssFall, at.theta).map((value) => value / residualVariance);
	const columns = indices.map((k) => {
		const width = 1e-4 * Math.max(0.1, Math.abs(at.theta[k]));
		const move = (size: number): Theta => {
			const [a, b, d] = at.theta;
			return [a + (k === 0 ? size : 0), b + (k === 1 ? size : 0), d + (k === 2 ? size : 0)];
		};
		const [up, down] = [gradientAt(move(width)), gradientAt(move(-width))];
		return indices.map((i) => (up[i] - down[i]) / (2 * width));
	});
	const inner = indices.map((_, i) =>
		indices.map((__, j) => (cell(columns, i, j) + cell(columns, j, i)) / 2)
	);
	const corner = at.profile.rss / residualVariance;
	const cross = indices.map((k) => fall[k] ?? 0);
	return [...inner.map((row, i) => [...row, entry(cross, i)]), [...cross, corner]];
}

/** Inverse on the directions with curvature. */
function invertCurved(H: number[][]): number[][] {
	const { values, vectors } = computeSymmetricEigen(H);
	const largest = Math.max(...values);
	return H.map((_, i) =>
		H.map((__, j) =>
			values.reduce((sum, value, k) => {
				if (!(value > 1e-6 * largest)) return sum;
				return sum + (cell(vectors, k, i) * cell(vectors, k, j)) / value;
			}, 0)
		)
	);
}
