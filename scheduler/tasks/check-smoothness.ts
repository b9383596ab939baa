import type { Vector } from '../linear-algebra/vector.ts';
import type { Task } from './task.ts';

/** Largest relative disagreement of slopes that a smooth result shows. */
const DISAGREEMENT_MAX = 1e-4;
/** Least share of the one-sided gap that a kink keeps when the step is halved; a smooth result keeps half. */
const GAP_KEPT = 0.75;
const STEP_SHARE = Number.EPSILON ** (1 / 3);

/**
 * Whether the results have one slope at an execution, not a kink or a jump, as min, max, abs and atan2 of
 * a formula may have.
 *
 * Method:  central differences with steps h and h/2 against each other and against the Jacobian, and the
 *          gap between the slopes to the left and to the right, which must close with the step.
 * Source:  method sheet A7. Null where a result is not defined at or around the execution.
 */
export function checkSmoothness(task: Task, x: Vector): boolean | null {
	const jacobian = task.jacobian(x);
	const verdicts = task.variables.flatMap(({ scale }, j) => {
		const step = STEP_SHARE * Math.max(Math.abs(x[j] ?? 0), scale);
		const wide = differ(task, x, j, step);
		const narrow = differ(task, x, j, step / 2);
		return jacobian.map((slopes, k) => judge(slopes[j] ?? Number.NaN, wide[k], narrow[k]));
	});
	if (verdicts.includes(null)) return null;
	return !verdicts.includes(false);
}

interface Slopes {
	readonly central: number;
	/** Slope to the right less slope to the left. */
	readonly gap: number;
	/** Size of slopes that rounding alone may make. */
	readonly noise: number;
}

function differ(task: Task, x: Vector, j: number, step: number): Slopes[] {
	const at = (sign: number) =>
		task.results(x.map((value, i) => (i === j ? value + sign * step : value)));
	const [up, here, down] = [at(1), at(0), at(-1)];
	return here.map((middle, k) => {
		const [a, b] = [up[k] ?? Number.NaN, down[k] ?? Number.NaN];
		const size = Math.max(Math.abs(a), Math.abs(b), Math.abs(middle));
		const rounding = Math.max(size * Number.EPSILON, task.resultRounding ?? 0);
		return {
			central: (a - b) / (2 * step),
			gap: (a - 2 * middle + b) / step,
			noise: (8 * rounding) / step
		};
	});
}

function judge(exact: number, wide?: Slopes, narrow?: Slopes): boolean | null {
	if (!wide || !narrow) return null;
	const values = [exact, wide.central, wide.gap, narrow.central, narrow.gap];
	if (!values.every(Number.isFinite)) return null;
	const size = Math.max(...values.map(Math.abs));
	const allowed = DISAGREEMENT_MAX * size + narrow.noise;
	const agrees =
		Math.abs(wide.central - narrow.central) <= allowed &&
		Math.abs(narrow.central - exact) <= allowed;
	const isKinked =
		Math.abs(narrow.gap) > allowed && Math.abs(narrow.gap) > GAP_KEPT * Math.abs(wide.gap);
	return agrees && !isKinked;
}
