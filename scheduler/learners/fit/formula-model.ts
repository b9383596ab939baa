import { compileDual, compileValue } from '../../tasks/formula/compile-formula.ts';
import { parseFormula } from '../../tasks/formula/parse-formula.ts';
import type { CurveModel } from './least-squares.ts';

/**
 * A curve written as a formula over the time and named parameters.
 *
 * Method:  exact slopes by dual numbers, as for a task's own formula; nothing is executed.
 * Source:  method sheet A7, C (Curves). Accuracy: tests/reference/nist-curves.test.ts.
 * @throws {RangeError} a formula that cannot be read, with the place of the fault
 * @example createFormulaModel({ formula: 'A + B*exp(-k*t)', time: 't', parameters: ['A', 'B', 'k'] })
 */
export function createFormulaModel(options: {
	formula: string;
	time: string;
	parameters: readonly string[];
}): CurveModel {
	const { formula, time, parameters: names } = options;
	const parsed = parseFormula(formula, [time, ...names]);
	if (!parsed.ok)
		throw new RangeError(`formula, character ${parsed.position + 1}: ${parsed.message}`);
	const value = compileValue(parsed.expression);
	const dual = compileDual(parsed.expression, names.length + 1);
	return {
		names,
		value: (at, parameters) => value([at, ...parameters]),
		slopes: (at, parameters) => dual([at, ...parameters]).slopes.slice(1)
	};
}
