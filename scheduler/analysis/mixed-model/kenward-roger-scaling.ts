import { computeCholesky, solveWithCholesky } from '../../linear-algebra/cholesky.ts';
import { multiplyMatrices, transpose } from '../../linear-algebra/matrix.ts';
import { cell, type Matrix } from '../../linear-algebra/vector.ts';

/**
 * Scaling of the Wald F statistic and its denominator degrees of freedom, by matching two moments.
 *
 * Shapes:  contrasts (l × p), phi (p × p), P (r matrices p × p), W (r × r).
 * Source:  M. Kenward and J. Roger, Biometrics 53 (1997), section 3.
 * @throws {RangeError} contrasts that depend on each other
 */
export function combineKenwardRoger(parts: {
	contrasts: Matrix;
	phi: Matrix;
	P: readonly Matrix[];
	W: Matrix;
}): { df: number; scale: number } {
	const { contrasts, phi, P, W } = parts;
	const l = contrasts.length;
	const theta = multiplyMatrices(
		multiplyMatrices(transpose(contrasts), invertBetween(contrasts, phi)),
		contrasts
	);
	const thetaPhi = multiplyMatrices(theta, phi);
	const products = P.map((Pi) => multiplyMatrices(multiplyMatrices(thetaPhi, Pi), phi));
	let [a1, a2] = [0, 0];
	products.forEach((left, i) =>
		products.forEach((right, j) => {
			const weight = cell(W, i, j);
			a1 += weight * traceOf(left) * traceOf(right);
			a2 += weight * traceOf(multiplyMatrices(left, right));
		})
	);
	return matchMoments(l, a1, a2);
}

function matchMoments(l: number, a1: number, a2: number): { df: number; scale: number } {
	const b = (a1 + 6 * a2) / (2 * l);
	const g = ((l + 1) * a1 - (l + 4) * a2) / ((l + 2) * a2);
	const under = 3 * l + 2 * (1 - g);
	const [c1, c2, c3] = [g / under, (l - g) / under, (l + 2 - g) / under];
	const mean = 1 / (1 - a2 / l);
	const spread = ((2 / l) * (1 + c1 * b)) / ((1 - c2 * b) * (1 - c2 * b) * (1 - c3 * b));
	const rho = spread / (2 * mean * mean);
	const df = 4 + (l + 2) / (l * rho - 1);
	return { df, scale: df / (mean * (df - 2)) };
}

/** (L Φ Lᵀ)⁻¹. */
function invertBetween(contrasts: Matrix, phi: Matrix): number[][] {
	const middle = multiplyMatrices(multiplyMatrices(contrasts, phi), transpose(contrasts));
	const factor = computeCholesky(middle);
	if (!factor.ok) throw new RangeError('the contrasts depend on each other');
	return middle.map((_, i) =>
		solveWithCholesky(
			factor.lower,
			middle.map((__, j) => (i === j ? 1 : 0))
		)
	);
}

function traceOf(A: Matrix): number {
	return A.reduce((sum, _, i) => sum + cell(A, i, i), 0);
}
