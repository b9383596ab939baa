import {
	computeProfile,
	reduceCell,
	solveLowerInPlace,
	type Method,
	type Profile,
	type Theta
} from './criterion.ts';
import type { ModelSums } from './model-sums.ts';

/** A symmetric 2 × 2 matrix: [11, 12, 22]. */
export type Symmetric = [number, number, number];

/** Derivatives of the parts of the criterion by the relative covariance D = L·Lᵀ. */
export type Slopes = {
	/** Of log det M + (REML) log det A. */
	logDets: Symmetric;
	/** Of the residual sum of squares, with the sign turned. */
	rssFall: Symmetric;
};

/**
 * Exact derivatives by D: K = Zᵀ V⁻¹ Z, T = I - G F, w = T (Zᵀy - ZᵀX b);
 * Σ [K - T ZᵀX A⁻¹ XᵀZ Tᵀ] and Σ w wᵀ.
 * Source: power sheet, section 5; checked against differences in mixed-model.test.ts.
 */
export function computeSlopes(
	sums: ModelSums,
	{ theta, profile, method }: { theta: Theta; profile: Profile; method: Method }
): Slopes {
	const { p } = sums;
	const logDets: Symmetric = [0, 0, 0];
	const rssFall: Symmetric = [0, 0, 0];
	const [u1, u2] = [new Float64Array(p), new Float64Array(p)];
	for (const { count, g, zx, zy, zyzy } of sums.cells) {
		const { f11, f12, f22 } = reduceCell(theta, g);
		const [g11, g12, g22] = g;
		const [t11, t12] = [1 - g11 * f11 - g12 * f12, -g11 * f12 - g12 * f22];
		const [t21, t22] = [-g12 * f11 - g22 * f12, 1 - g12 * f12 - g22 * f22];
		let [k11, k12, k22] = [t11 * g11 + t12 * g12, t11 * g12 + t12 * g22, t21 * g12 + t22 * g22];
		let [fit1, fit2] = [0, 0];
		for (let j = 0; j < p; j += 1) {
			const [x1, x2] = [zx[j] ?? 0, zx[p + j] ?? 0];
			u1[j] = t11 * x1 + t12 * x2;
			u2[j] = t21 * x1 + t22 * x2;
			fit1 += x1 * (profile.shift[j] ?? 0);
			fit2 += x2 * (profile.shift[j] ?? 0);
		}
		if (method === 'REML') {
			solveLowerInPlace(profile.lower, u1, p);
			solveLowerInPlace(profile.lower, u2, p);
			for (let j = 0; j < p; j += 1) {
				const [a, b] = [u1[j] ?? 0, u2[j] ?? 0];
				k11 -= a * a;
				k12 -= a * b;
				k22 -= b * b;
			}
		}
		// Sum over the cell of (Zᵀy - fit)(Zᵀy - fit)ᵀ.
		const e11 = zyzy[0] - 2 * zy[0] * fit1 + count * fit1 * fit1;
		const e12 = zyzy[1] - zy[0] * fit2 - zy[1] * fit1 + count * fit1 * fit2;
		const e22 = zyzy[2] - 2 * zy[1] * fit2 + count * fit2 * fit2;
		logDets[0] += count * k11;
		logDets[1] += count * k12;
		logDets[2] += count * k22;
		rssFall[0] += t11 * t11 * e11 + 2 * t11 * t12 * e12 + t12 * t12 * e22;
		rssFall[1] += t11 * t21 * e11 + (t11 * t22 + t12 * t21) * e12 + t12 * t22 * e22;
		rssFall[2] += t21 * t21 * e11 + 2 * t21 * t22 * e12 + t22 * t22 * e22;
	}
	return { logDets, rssFall };
}

/** Criterion, its derivative by D, and its gradient by theta. */
export type Evaluated = {
	theta: Theta;
	profile: Profile;
	/** S: the derivative by D. */
	slope: Symmetric;
	gradient: [number, number, number];
};

export function evaluateCriterion(sums: ModelSums, theta: Theta, method: Method): Evaluated {
	const profile = computeProfile(sums, theta, method);
	const { logDets, rssFall } = computeSlopes(sums, { theta, profile, method });
	const weight = (method === 'REML' ? sums.rowCount - sums.p : sums.rowCount) / profile.rss;
	const slope: Symmetric = [
		logDets[0] - weight * rssFall[0],
		logDets[1] - weight * rssFall[1],
		logDets[2] - weight * rssFall[2]
	];
	return { theta, profile, slope, gradient: toThetaGradient(slope, theta) };
}

/** 2 S L, its lower triangle. */
export function toThetaGradient(
	[s11, s12, s22]: Symmetric,
	[a, b, d]: Theta
): [number, number, number] {
	return [2 * (s11 * a + s12 * b), 2 * (s12 * a + s22 * b), 2 * s22 * d];
}
