import { computeCholesky, solveWithCholesky } from '../../linear-algebra/cholesky.ts';
import {
	addMatrices,
	multiplyMatrices,
	scaleMatrix,
	transpose
} from '../../linear-algebra/matrix.ts';
import { cell, type Matrix } from '../../linear-algebra/vector.ts';
import { reduceCell } from './criterion.ts';
import {
	invertFactored,
	toGivenColumns,
	toSolutionContrast,
	type Solution
} from './fit-mixed-model.ts';
import { combineKenwardRoger } from './kenward-roger-scaling.ts';
import { multiplyT } from './satterthwaite.ts';

export type KenwardRoger =
	| {
			ok: true;
			/** Covariance of the coefficients, adjusted for the estimated variances. */
			covariance: number[][];
			/** F scaling and denominator degrees of freedom of contrasts (rows of p numbers). */
			test: (contrasts: Matrix) => { df: number; scale: number };
	  }
	/** The information about the variances cannot be inverted, as with a variance at 0. */
	| { ok: false; reason: 'no-information' };

/**
 * Kenward and Roger's adjusted covariance of the fixed effects and degrees of freedom.
 *
 * Shapes:  REML fit in; covariance (p × p) and a test of contrasts (l × p) out.
 * Method:  second-order adjustment with the expected information of the variance parameters (the
 *          random effects' covariance and the residual variance, in which V is linear).
 * Source:  M. Kenward and J. Roger, Biometrics 53 (1997); U. Halekoh and S. Højsgaard, J Stat Softw
 *          59 (2014).
 * Accuracy: relative 1e-5 of pbkrtest; tests/reference/mixed-model.test.ts.
 * @throws {RangeError} a fit by ML, or contrasts that depend on each other
 */
export function computeKenwardRoger(solution: Solution): KenwardRoger {
	const { sums, at, residualVariance, method } = solution;
	if (method !== 'REML') throw new RangeError('Kenward and Roger’s adjustment needs a REML fit');
	const phi = scaleMatrix(invertFactored(at.profile.lower, sums.p), residualVariance);
	const { P, Q, trace } = sumParts(solution);
	const information = P.map((Pi, i) =>
		P.map((Pj, j) => {
			const phiQ = traceOf(multiplyMatrices(phi, matrixAt(Q, i, j)));
			const phiP = traceOf(multiplyMatrices(multiplyMatrices(phi, Pi), multiplyMatrices(phi, Pj)));
			return cell(trace, i, j) - 2 * phiQ + phiP;
		})
	);
	const W = invertInformation(information);
	if (!W) return { ok: false, reason: 'no-information' };
	let U = scaleMatrix(phi, 0);
	P.forEach((Pi, i) =>
		P.forEach((Pj, j) => {
			const part = multiplyMatrices(multiplyMatrices(Pi, phi), Pj);
			U = addMatrices(
				U,
				scaleMatrix(addMatrices(matrixAt(Q, i, j), scaleMatrix(part, -1)), cell(W, i, j))
			);
		})
	);
	const adjusted = addMatrices(
		phi,
		scaleMatrix(multiplyMatrices(multiplyMatrices(phi, U), phi), 2)
	);
	return {
		ok: true,
		covariance: toGivenColumns(sums, adjusted),
		test: (contrasts) =>
			combineKenwardRoger({
				contrasts: contrasts.map((contrast) => toSolutionContrast(sums, contrast)),
				...{ phi, P, W }
			})
	};
}

/**
 * P_r = -XᵀV⁻¹G_rV⁻¹X, Q_rs = XᵀV⁻¹G_rV⁻¹G_sV⁻¹X and tr(V⁻¹G_rV⁻¹G_s), from sums alone: each G_r is
 * Z E_r Zᵀ, the last the unit matrix.
 */
function sumParts({ sums, at, residualVariance: s2 }: Solution) {
	const { p, q } = sums;
	const E = listUnits(q);
	const count = E.length + 1;
	const zero = () => Array.from({ length: p }, () => new Array<number>(p).fill(0));
	const P = Array.from({ length: count }, zero);
	const Q = Array.from({ length: count }, () => Array.from({ length: count }, zero));
	const trace = Array.from({ length: count }, () => new Array<number>(count).fill(0));
	const last = count - 1;
	for (const { count: groups, rowCount, g, zx, xx } of sums.cells) {
		const G = square(g);
		const { f11, f12, f22 } = reduceCell(at.theta, g);
		const F = square([f11, f12, f22]);
		const FG = multiplyMatrices(F, G);
		const T = addMatrices(square([1, 0, 1]), scaleMatrix(transpose(FG), -1));
		const K = scaleMatrix(multiplyMatrices(T, G), 1 / s2);
		const K2 = scaleMatrix(multiplyMatrices(multiplyMatrices(T, G), transpose(T)), 1 / (s2 * s2));
		const B = multiplyT(at.theta, g, zx, p).map((row) => row.map((value) => value / s2));
		const B2 = scaleMatrix(multiplyMatrices(T, B), 1 / s2);
		const X = [Array.from(zx.subarray(0, p)), Array.from(zx.subarray(p))];
		const XX = Array.from({ length: p }, (_, i) => Array.from(xx.subarray(i * p, i * p + p)));
		const around = (middle: Matrix) => multiplyMatrices(multiplyMatrices(transpose(X), middle), X);
		const FGF = multiplyMatrices(FG, F);
		const squared = combine(XX, [around(F), -2], [around(FGF), 1]);
		const cubed = combine(
			XX,
			[around(F), -3],
			[around(FGF), 3],
			[around(multiplyMatrices(FG, FGF)), -1]
		);
		E.forEach((Er, r) => {
			const Br = multiplyMatrices(transpose(B), Er);
			accumulate(P[r], multiplyMatrices(Br, B), -groups);
			E.forEach((Es, s) => {
				const KEs = multiplyMatrices(K, Es);
				accumulate(Q[r]?.[s], multiplyMatrices(multiplyMatrices(Br, KEs), B), groups);
				add(trace[r], s, groups * traceOf(multiplyMatrices(multiplyMatrices(Er, KEs), K)));
			});
			const mixed = multiplyMatrices(Br, B2);
			accumulate(Q[r]?.[last], mixed, groups);
			accumulate(Q[last]?.[r], transpose(mixed), groups);
			const shared = groups * traceOf(multiplyMatrices(Er, K2));
			add(trace[r], last, shared);
			add(trace[last], r, shared);
		});
		accumulate(P[last], squared, -groups / (s2 * s2));
		accumulate(Q[last]?.[last], cubed, groups / s2 ** 3);
		const rest = rowCount - 2 * traceOf(FG) + traceOf(multiplyMatrices(FG, FG));
		add(trace[last], last, (groups * rest) / (s2 * s2));
	}
	return { P, Q, trace };
}

/** The derivatives of D by its entries. */
function listUnits(q: 1 | 2): Matrix[] {
	if (q === 1) return [square([1, 0, 0])];
	return [square([1, 0, 0]), square([0, 1, 0]), square([0, 0, 1])];
}

function square([a, b, d]: readonly [number, number, number]): number[][] {
	return [
		[a, b],
		[b, d]
	];
}

function combine(first: Matrix, ...rest: [Matrix, number][]): number[][] {
	return rest.reduce<number[][]>(
		(sum, [matrix, weight]) => addMatrices(sum, scaleMatrix(matrix, weight)),
		scaleMatrix(first, 1)
	);
}

function accumulate(target: number[][] | undefined, matrix: Matrix, weight: number): void {
	target?.forEach((row, i) =>
		row.forEach((value, j) => (row[j] = value + weight * cell(matrix, i, j)))
	);
}

function add(row: number[] | undefined, j: number, value: number): void {
	if (row) row[j] = (row[j] ?? 0) + value;
}

function matrixAt(Q: readonly Matrix[][], i: number, j: number): Matrix {
	return Q[i]?.[j] ?? [];
}

function traceOf(A: Matrix): number {
	return A.reduce((sum, _, i) => sum + cell(A, i, i), 0);
}

/** Twice the inverse of the information, which is scaled to a unit diagonal for it. */
function invertInformation(information: Matrix): number[][] | null {
	const sizes = information.map((_, i) => Math.sqrt(cell(information, i, i)));
	if (!sizes.every((size) => size > 0)) return null;
	const scaled = information.map((row, i) =>
		row.map((value, j) => value / ((sizes[i] ?? 1) * (sizes[j] ?? 1)))
	);
	const factor = computeCholesky(scaled);
	if (!factor.ok || factor.lower.some((row, i) => (row[i] ?? 0) < 1e-7)) return null;
	return scaled.map((_, i) => {
		const unit = scaled.map((__, j) => (i === j ? 1 : 0));
		return solveWithCholesky(factor.lower, unit).map(
			(value, j) => (2 * value) / ((sizes[i] ?? 1) * (sizes[j] ?? 1))
		);
	});
}
