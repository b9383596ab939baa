import { Matrix as DenseMatrix, QrDecomposition } from 'ml-matrix';
import { dot, entry, row, type Vector } from '../../linear-algebra/vector.ts';
import { CURVE_FORMS, type CurveForm, type CurveKind } from './curve-models.ts';
import { fitLeastSquares, type FitRequest } from './least-squares.ts';
import { computeProfileInterval, type ProfileInterval } from './profile-interval.ts';
import { findStarts } from './start-values.ts';

export interface FittedParameter {
	readonly name: string;
	readonly value: number;
	readonly standardError: number;
	/** Null: intervals were not asked for. */
	readonly interval: ProfileInterval | null;
}

export interface FittedCurve {
	readonly ok: true;
	readonly parameters: readonly FittedParameter[];
	/** Sum of squared residuals and the residual SD, √(rss / (n − p)). */
	readonly rss: number;
	readonly sigma: number;
	readonly df: number;
	/** Akaike's criterion with the correction for few values; null: too few values for it. */
	readonly aicc: number | null;
	readonly fitted: readonly number[];
}

export type CurveRefusal =
	/** No more values than parameters. */
	| 'too-few'
	/** A time at which the form has no value. */
	| 'time-out-of-range'
	| 'not-converged'
	/** The data do not tell the parameters apart, for instance a flat series. */
	| 'not-identified';

export type CurveFit = FittedCurve | { ok: false; reason: CurveRefusal };

/**
 * Fits a learning curve to one person's series.
 *
 * Shapes:  times and values of one length n; for bad values use `weights` = 1 / variance.
 * Units:   parameters in the unit of the values; rates per unit of time (k of a power: none).
 * Method:  least squares from the best places of a grid; standard errors from the Jacobian at the end;
 *          intervals by profile.
 * Decision: none; a form is chosen by the caller, for instance by aicc.
 * Source:  method sheet C (Curves). Accuracy: case learning-curve-exponential to 1e-5 (R nls, five digits).
 * @throws {RangeError} lists of unequal length
 * @example fitLearningCurve({ kind: 'exponential', times: [1, 2, 3, 4, 5], values })
 */
export function fitLearningCurve(options: {
	kind: CurveKind;
	times: Vector;
	values: Vector;
	weights?: Vector | undefined;
	/** Confidence of the intervals; null: none. */
	level?: number | null;
}): CurveFit {
	const { kind, times, values } = options;
	const form = CURVE_FORMS[kind];
	if (values.length !== times.length)
		throw new RangeError('times and values must be of one length');
	if (times.length <= form.names.length) return { ok: false, reason: 'too-few' };
	if (times.some((time) => !(time > form.timeAbove)))
		return { ok: false, reason: 'time-out-of-range' };
	if (values.every((value) => value === values[0])) return { ok: false, reason: 'not-identified' };
	const starts = findStarts({ kind, form, times, values });
	return fitFromStarts({ ...options, model: form, starts });
}

/**
 * The same for any curve, started from the given places; the best end counts.
 */
export function fitFromStarts(
	options: Omit<FitRequest, 'start' | 'fixed'> & {
		starts: readonly Vector[];
		level?: number | null;
	}
): CurveFit {
	const { starts, level = 0.95, ...rest } = options;
	const ends = starts
		.map((start) => fitLeastSquares({ ...rest, start }))
		.filter((fit) => fit.ok)
		.sort((a, b) => a.rss - b.rss);
	const [best] = ends;
	if (!best) return { ok: false, reason: starts.length > 0 ? 'not-converged' : 'not-identified' };
	return describeFit({ ...rest, start: best.parameters }, order(rest.model, best), level);
}

/** The faster phase first. */
function order(model: FitRequest['model'], fit: { parameters: number[]; rss: number }) {
	const [A = 0, B1 = 0, B2 = 0, k1 = 0, k2 = 0] = fit.parameters;
	if (model !== CURVE_FORMS['two-phase'] || k1 >= k2) return fit;
	return { ...fit, parameters: [A, B2, B1, k2, k1] };
}

function describeFit(
	request: FitRequest,
	{ parameters, rss }: { parameters: number[]; rss: number },
	level: number | null
): CurveFit {
	const { model, times } = request;
	const df = times.length - parameters.length;
	const unit = computeUnitErrors(request, parameters);
	if (!unit) return { ok: false, reason: 'not-identified' };
	const sigma = Math.sqrt(rss / df);
	const describe = (name: string, place: number): FittedParameter => {
		const standardError = sigma * entry(unit, place);
		const profile = { request, parameters, rss, place, standardError, level: level ?? 0 };
		const interval = level === null || rss === 0 ? null : computeProfileInterval(profile);
		return { name, value: entry(parameters, place), standardError, interval };
	};
	return {
		ok: true,
		parameters: model.names.map(describe),
		...{ rss, sigma, df, aicc: computeAicc(rss, times.length, parameters.length) },
		fitted: times.map((time) => model.value(time, parameters))
	};
}

/** Square roots of the diagonal of (JᵀWJ)⁻¹, from the triangle of J; null where J has not full rank. */
function computeUnitErrors({ model, times, weights }: FitRequest, parameters: Vector) {
	const rows = times.map((time, i) =>
		model.slopes(time, parameters).map((slope) => Math.sqrt(weights?.[i] ?? 1) * slope)
	);
	const norms = row(rows, 0).map((_, j) => Math.hypot(...rows.map((slopes) => entry(slopes, j))));
	if (norms.some((length) => !(length > 0))) return null;
	const scaled = rows.map((slopes) => slopes.map((slope, j) => slope / entry(norms, j)));
	const R = new QrDecomposition(new DenseMatrix(scaled)).upperTriangularMatrix.to2DArray();
	const least = Math.min(...R.map((values, i) => Math.abs(entry(values, i))));
	if (!(least > 1e-12)) return null;
	return invertTriangle(R).map((values, j) => Math.sqrt(dot(values, values)) / entry(norms, j));
}

/** R⁻¹ of an upper triangle. */
function invertTriangle(R: readonly Vector[]): number[][] {
	const n = R.length;
	const inverse = R.map(() => Array.from({ length: n }, () => 0));
	for (let j = 0; j < n; j++) {
		for (let i = j; i >= 0; i--) {
			let sum = i === j ? 1 : 0;
			for (let k = i + 1; k <= j; k++) sum -= entry(row(R, i), k) * entry(row(inverse, k), j);
			const target = inverse[i];
			if (target) target[j] = sum / entry(row(R, i), i);
		}
	}
	return inverse;
}

/** n·ln(RSS/n) + 2K + 2K(K+1)/(n−K−1), K = p + 1 for the residual variance. */
function computeAicc(rss: number, n: number, p: number): number | null {
	const K = p + 1;
	if (n <= K + 1 || !(rss > 0)) return null;
	return n * Math.log(rss / n) + 2 * K + (2 * K * (K + 1)) / (n - K - 1);
}

/** Fits every form and puts the one with the least aicc first; forms that cannot be fitted are named. */
export function compareCurves(options: {
	kinds: readonly CurveKind[];
	times: Vector;
	values: Vector;
}): {
	fits: (FittedCurve & { kind: CurveKind })[];
	refused: Partial<Record<CurveKind, CurveRefusal>>;
} {
	const refused: Partial<Record<CurveKind, CurveRefusal>> = {};
	const fits = options.kinds.flatMap((kind) => {
		const fit = fitLearningCurve({ ...options, kind, level: null });
		if (fit.ok) return [{ ...fit, kind }];
		refused[kind] = fit.reason;
		return [];
	});
	const rank = ({ aicc }: FittedCurve) => aicc ?? Number.POSITIVE_INFINITY;
	return { fits: fits.sort((a, b) => rank(a) - rank(b)), refused };
}

export type { CurveForm, CurveKind };
