import type { Vector } from '../../linear-algebra/vector.ts';
import { compileDual } from './compile-formula.ts';
import type { Expression } from './parse-formula.ts';

/** Step of the differences, as a share of the larger of 1 and the value: ε^(1/3). */
const STEP_SHARE = Number.EPSILON ** (1 / 3);

/**
 * Second derivatives of a formula.
 *
 * Shapes:  x (d) in, (d × d) out, symmetric.
 * Method:  central differences of the exact gradient, steps h and h/2 combined (Richardson).
 * Source:  method sheet A7. Accuracy: 1e-8 relative for smooth formulas, case generic-gradient.
 */
export function computeFormulaHessian(tree: Expression, x: Vector): number[][] {
	const gradient = compileDual(tree, x.length);
	const slopesAlong = (j: number, step: number) => {
		const at = (sign: number) =>
			gradient(x.map((value, i) => (i === j ? value + sign * step : value))).slopes;
		const [up, down] = [at(1), at(-1)];
		return up.map((slope, i) => (slope - (down[i] ?? 0)) / (2 * step));
	};
	const columns = x.map((value, j) => {
		const step = STEP_SHARE * Math.max(1, Math.abs(value));
		const coarse = slopesAlong(j, step);
		return slopesAlong(j, step / 2).map((fine, i) => (4 * fine - (coarse[i] ?? 0)) / 3);
	});
	return columns.map((values, j) => values.map((value, i) => (value + (columns[i]?.[j] ?? 0)) / 2));
}
