import { solveUpper, solveUpperTransposed } from '../orthogonal-columns.ts';
import { reduceCell, type Method, type Theta } from './criterion.ts';
import type { Evaluated } from './gradient.ts';
import { minimiseCriterion } from './minimise-criterion.ts';
import { sumModel, type MixedModelData, type ModelSums } from './model-sums.ts';

export type MixedModelFit = {
	ok: true;
	method: Method;
	/** Fixed effects, in the order of the columns. */
	coefficients: number[];
	/** Covariance of the coefficients (not adjusted for small samples). */
	covariance: number[][];
	residualSd: number;
	/** Standard deviations of the random effects, in the order of their columns. */
	randomSds: number[];
	/** Between the two random effects; null with one, or when either has (all but) no variance. */
	randomCorrelation: number | null;
	/** Covariance of the random effects: [11], or [11, 12, 22]. */
	randomCovariance: number[];
	/** -2 log (restricted) likelihood. */
	criterion: number;
	logLikelihood: number;
	aic: number;
	bic: number;
	/** A variance at 0 or a correlation at ±1: a usual outcome of few people, not a failure. */
	isSingular: boolean;
	/** Predicted random effects of each group, in the order in which groups first occur. */
	predictedEffects: number[][];
	counts: { rows: number; groups: number; parameters: number; evaluations: number };
	/** What inference goes on from. */
	solution: Solution;
};

/** The fit in the coordinates of its sums. */
export type Solution = { sums: ModelSums; at: Evaluated; residualVariance: number; method: Method };

export type MixedModelResult =
	| MixedModelFit
	| {
			ok: false;
			reason: 'collinear' | 'too-few-rows' | 'too-few-groups' | 'no-residual' | 'not-converged';
	  };

/**
 * Linear mixed model with a random intercept, or a random intercept and slope, for one grouping.
 *
 * Shapes:  y (n), fixed (p columns of n), random (1 or 2 columns of n), group (n); coefficients (p).
 * Units:   those of the columns.
 * Method:  restricted or full likelihood, profiled over theta, the relative Cholesky factor of the
 *          random effects' covariance; sums for each kind of design instead of rows. The covariance of
 *          random effects is unstructured.
 * Source:  D. Bates et al., J Stat Softw 67 (2015); power sheet, section 5.
 * Accuracy: criterion at most 1e-8 above lme4's, coefficients and standard errors within 2e-4
 *          standard errors; tests/reference/mixed-model.test.ts.
 * @throws {RangeError} columns of different lengths, no or more than two random columns, no number
 * @example fitMixedModel({ y, fixed: [ones, days], group, random: [ones, days] }, 'REML')
 */
export function fitMixedModel(data: MixedModelData, method: Method): MixedModelResult {
	const summed = sumModel(data);
	if (!summed.ok) return summed;
	const { sums } = summed;
	const minimum = minimiseCriterion(sums, method);
	if (!minimum.ok) return minimum;
	const { best: at, evaluations } = minimum;
	const { rowCount: n, p, q, groupCount, upper, base } = sums;
	const residualVariance = at.profile.rss / (method === 'REML' ? n - p : n);
	const { criterion } = at.profile;
	const parameters = p + (q === 1 ? 1 : 3) + 1;
	return {
		...{ ok: true, method, criterion, logLikelihood: -criterion / 2 },
		coefficients: solveUpper(
			upper,
			base.map((value, j) => value + (at.profile.shift[j] ?? 0))
		),
		covariance: computeCovariance(sums, at, residualVariance),
		residualSd: Math.sqrt(residualVariance),
		...describeRandom(sums, at.theta, residualVariance),
		aic: criterion + 2 * parameters,
		bic: criterion + Math.log(n) * parameters,
		predictedEffects: predictEffects(sums, at),
		counts: { rows: n, groups: groupCount, parameters, evaluations },
		solution: { sums, at, residualVariance, method }
	};
}

/** σ² (XᵀV⁻¹X)⁻¹ in the columns given. */
function computeCovariance(sums: ModelSums, at: Evaluated, residualVariance: number): number[][] {
	const columns = invertFactored(at.profile.lower, sums.p);
	const scaled = columns.map((row) => row.map((value) => value * residualVariance));
	return toGivenColumns(sums, scaled);
}

/** R⁻¹ W R⁻ᵀ: a covariance of coefficients of Q as one of coefficients of X. */
export function toGivenColumns({ upper }: ModelSums, W: readonly number[][]): number[][] {
	const half = W.map((row) => solveUpper(upper, row));
	const turned = half.map((_, j) => half.map((row) => row[j] ?? 0));
	return turned.map((row) => solveUpper(upper, row));
}

/** A contrast of coefficients of X as one of coefficients of Q. */
export function toSolutionContrast({ upper }: ModelSums, contrast: readonly number[]): number[] {
	return solveUpperTransposed(upper, contrast);
}

/** (L Lᵀ)⁻¹ from L, row-major p × p. */
export function invertFactored(lower: Float64Array, p: number): number[][] {
	const inverse = Array.from({ length: p }, (_, j) => {
		const column = new Array<number>(p).fill(0);
		column[j] = 1;
		for (let i = j; i < p; i += 1) {
			let sum = column[i] ?? 0;
			for (let k = j; k < i; k += 1) sum -= (lower[i * p + k] ?? 0) * (column[k] ?? 0);
			column[i] = sum / (lower[i * p + i] ?? 1);
		}
		return column;
	});
	return inverse.map((a) =>
		inverse.map((b) => a.reduce((sum, value, k) => sum + value * (b[k] ?? 0), 0))
	);
}

/** Below this share of its row's length a diagonal of the factor counts as 0. */
const SINGULAR_SHARE = 1e-4;

/** L = C·L' in the columns of Z as given, and what it says. */
function describeRandom(sums: ModelSums, [a, b, d]: Theta, residualVariance: number) {
	const [c11, c21, c22] = sums.spread;
	const [l11, l21, l22] = [c11 * a, c21 * a + c22 * b, c22 * d];
	const v11 = residualVariance * l11 * l11;
	if (sums.q === 1) {
		const sds = { randomSds: [Math.sqrt(v11)], randomCovariance: [v11] };
		return { ...sds, randomCorrelation: null, isSingular: Math.abs(a) < SINGULAR_SHARE };
	}
	const v12 = residualVariance * l11 * l21;
	const v22 = residualVariance * (l21 * l21 + l22 * l22);
	const isFlat = [Math.abs(a), Math.hypot(l21, l22) / c22].map((size) => size < SINGULAR_SHARE);
	const correlation = v12 / Math.sqrt(v11 * v22);
	return {
		...{ randomSds: [Math.sqrt(v11), Math.sqrt(v22)], randomCovariance: [v11, v12, v22] },
		randomCorrelation: isFlat.includes(true) ? null : Math.max(-1, Math.min(1, correlation)),
		isSingular: isFlat.includes(true) || Math.abs(l22) < SINGULAR_SHARE * Math.hypot(l21, l22)
	};
}

/** D Zᵀ V⁻¹ (y - X b) of each group, in the columns of Z as given. */
function predictEffects(sums: ModelSums, { theta, profile }: Evaluated): number[][] {
	const [c11, c21, c22] = sums.spread;
	const { p } = sums;
	return sums.groups.map(({ g, zx, zy }) => {
		const { f11, f12, f22 } = reduceCell(theta, g);
		let [e1, e2] = zy;
		for (let j = 0; j < p; j += 1) {
			e1 -= (zx[j] ?? 0) * (profile.shift[j] ?? 0);
			e2 -= (zx[p + j] ?? 0) * (profile.shift[j] ?? 0);
		}
		const [u1, u2] = [f11 * e1 + f12 * e2, f12 * e1 + f22 * e2];
		return sums.q === 1 ? [c11 * u1] : [c11 * u1, c21 * u1 + c22 * u2];
	});
}
