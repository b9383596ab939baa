import { Matrix as DenseMatrix, QrDecomposition } from 'ml-matrix';
import { dot, entry, norm, row, type Matrix, type Vector } from '../../linear-algebra/vector.ts';

/** A curve over time with parameters to be fitted. */
export interface CurveModel {
	readonly names: readonly string[];
	/** Value at a time; Number.NaN where the curve has none. */
	value(time: number, parameters: Vector): number;
	/** Derivative of the value by each parameter. */
	slopes(time: number, parameters: Vector): number[];
}

export interface FitRequest {
	readonly model: CurveModel;
	readonly times: Vector;
	readonly values: Vector;
	/** One positive weight a value, 1 / variance; all 1 when left out. */
	readonly weights?: Vector | undefined;
	readonly start: Vector;
	/** Place of a parameter that stays at its start value. */
	readonly fixed?: number | undefined;
}

export type LeastSquaresFit =
	| {
			ok: true;
			parameters: number[];
			/** Weighted sum of squared residuals. */
			rss: number;
			rounds: number;
	  }
	| { ok: false; reason: 'not-converged' | 'not-identified' | 'no-value-at-start' };

const ROUNDS_MAX = 2000;
const DAMPING = { start: 1e-2, least: 1e-14, most: 1e16 } as const;
/** Relative length of a step below which the parameters stand still. */
const STEP_DONE = 1e-12;
/** Share of the residuals that the tangent plane could still explain. */
const OFFSET_DONE = 1e-9;
/** The same where the sum itself has no digits left to tell. */
const OFFSET_SMALL = 1e-6;
const SUM_NOISE = 1e-13;

/**
 * Least squares for a curve that is not linear in its parameters.
 *
 * Shapes:  times, values and weights of one length n; start and parameters of the model's length p.
 * Units:   those of the values and times.
 * Method:  Levenberg and Marquardt with the largest column norms as scale, each step by a Householder
 *          factorisation of the damped Jacobian (ml-matrix), never by normal equations; done when the
 *          tangent plane explains less than 1e-9 of the residuals, or no step changes a parameter.
 * Source:  J. J. Moré, in: Numerical Analysis, Springer (1978); stop rule of D. M. Bates and
 *          D. G. Watts, Technometrics 23 (1981).
 * Accuracy: 6 significant digits of the certified values, 4 for Lanczos3 and MGH17;
 *          tests/reference/nist-curves.test.ts.
 * @throws {RangeError} lists of unequal length, or no more values than parameters
 */
export function fitLeastSquares(request: FitRequest): LeastSquaresFit {
	checkRequest(request);
	const fit = walkDown(request);
	const end = fit.ok ? linearise(request, fit.parameters) : null;
	// A parameter that no longer moves any value cannot be told.
	if (end?.norms.some((length) => length === 0)) return { ok: false, reason: 'not-identified' };
	return fit;
}

function walkDown(request: FitRequest): LeastSquaresFit {
	let parameters = [...request.start];
	let here = linearise(request, parameters);
	if (!here) return { ok: false, reason: 'no-value-at-start' };
	const scales = here.norms.map((length) => length || 1);
	let damping: number = DAMPING.start;
	for (let round = 1; round <= ROUNDS_MAX; round++) {
		if (isOffsetDone(here)) return { ok: true, parameters, rss: here.rss, rounds: round };
		here.norms.forEach((length, j) => (scales[j] = Math.max(length, entry(scales, j))));
		const step = solveDamped(here, scales, damping);
		const moved = moveBy(parameters, step, request.fixed);
		const there = linearise(request, moved);
		if (there && isNoise(here, there))
			return { ok: true, parameters, rss: here.rss, rounds: round };
		if (there && there.rss < here.rss) {
			const isStill = isStepDone(parameters, moved, damping);
			parameters = moved;
			here = there;
			if (isStill) return { ok: true, parameters, rss: here.rss, rounds: round };
			damping = Math.max(DAMPING.least, damping / 10);
		} else {
			if (damping >= DAMPING.most) return settle(here, parameters, round);
			damping *= 4;
		}
	}
	return { ok: false, reason: 'not-converged' };
}

/** Residuals and Jacobian at a point, free parameters only. */
interface Linearised {
	readonly residuals: Vector;
	readonly jacobian: Matrix;
	readonly norms: Vector;
	readonly rss: number;
}

function linearise(request: FitRequest, parameters: Vector): Linearised | null {
	const { model, times, values, weights, fixed } = request;
	const roots = times.map((_, i) => Math.sqrt(weights ? entry(weights, i) : 1));
	const residuals = times.map(
		(time, i) => entry(roots, i) * (entry(values, i) - model.value(time, parameters))
	);
	const rss = dot(residuals, residuals);
	if (!Number.isFinite(rss)) return null;
	const jacobian = times.map((time, i) =>
		model
			.slopes(time, parameters)
			.filter((_, j) => j !== fixed)
			.map((slope) => entry(roots, i) * slope)
	);
	if (!jacobian.every((slopes) => slopes.every(Number.isFinite))) return null;
	const norms = row(jacobian, 0).map((_, j) => norm(jacobian.map((slopes) => entry(slopes, j))));
	return { residuals, jacobian, norms, rss };
}

/** The step δ that makes |J·δ − r|² + λ·|D·δ|² least. */
function solveDamped(
	{ jacobian, residuals }: Linearised,
	scales: Vector,
	damping: number
): number[] {
	const root = Math.sqrt(damping);
	const damped = scales.map((size, j) => scales.map((_, k) => (j === k ? root * size : 0)));
	const left = new DenseMatrix([...jacobian, ...damped].map((values) => [...values]));
	const right = DenseMatrix.columnVector([...residuals, ...scales.map(() => 0)]);
	return new QrDecomposition(left).solve(right).to1DArray();
}

function moveBy(parameters: Vector, step: Vector, fixed: number | undefined): number[] {
	let next = 0;
	return parameters.map((value, j) => (j === fixed ? value : value + entry(step, next++)));
}

function isOffsetDone(here: Linearised): boolean {
	return computeOffset(here) < OFFSET_DONE;
}

/** The sum changes in its last digits only, and the tangent plane explains next to nothing. */
function isNoise(here: Linearised, there: Linearised): boolean {
	const change = Math.abs(here.rss - there.rss);
	return change <= SUM_NOISE * here.rss && computeOffset(here) < OFFSET_SMALL;
}

/** Bates and Watts: length of the residuals' part in the tangent plane beside the rest. */
function computeOffset({ jacobian, residuals, norms, rss }: Linearised): number {
	const free = norms.length;
	if (rss === 0 || free === 0) return 0;
	if (norms.some((length) => length === 0)) return Number.POSITIVE_INFINITY;
	const columns = jacobian.map((slopes) => slopes.map((slope, j) => slope / entry(norms, j)));
	const factor = new QrDecomposition(new DenseMatrix(columns));
	if (!factor.isFullRank()) return Number.POSITIVE_INFINITY;
	const along = factor.orthogonalMatrix
		.transpose()
		.mmul(DenseMatrix.columnVector([...residuals]))
		.to1DArray();
	const explained = dot(along, along);
	const rest = Math.max(rss - explained, Number.MIN_VALUE);
	const freedom = Math.max(1, residuals.length - free);
	return Math.sqrt(explained / free / (rest / freedom));
}

function isStepDone(from: Vector, to: Vector, damping: number): boolean {
	const isSmall = from.every(
		(value, j) => Math.abs(entry(to, j) - value) <= STEP_DONE * (Math.abs(value) + STEP_DONE)
	);
	// A strongly damped step is short for another reason.
	return isSmall && damping <= 1e-4;
}

/** No step in any direction lowers the sum: the end, if the residuals are as flat as digits allow. */
function settle(here: Linearised, parameters: number[], rounds: number): LeastSquaresFit {
	const slope = here.norms.map((length, j) =>
		length === 0
			? 0
			: dot(
					here.jacobian.map((row_) => entry(row_, j)),
					here.residuals
				) / length
	);
	const isFlat = norm(slope) <= OFFSET_SMALL * Math.sqrt(here.rss);
	if (!isFlat) return { ok: false, reason: 'not-converged' };
	return { ok: true, parameters, rss: here.rss, rounds };
}

function checkRequest({ model, times, values, weights, start }: FitRequest): void {
	if (values.length !== times.length || (weights && weights.length !== times.length))
		throw new RangeError('times, values and weights must be of one length');
	if (start.length !== model.names.length)
		throw new RangeError(`the model has ${model.names.length} parameters, got ${start.length}`);
	if (times.length <= start.length)
		throw new RangeError(`${start.length} parameters need more than ${times.length} values`);
}
