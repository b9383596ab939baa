import { entry, type Vector } from '../../linear-algebra/vector.ts';
import { ONE_VALUE, TWO_VALUES } from './formula-functions.ts';
import type { Expression, Operator } from './parse-formula.ts';

/** A value together with its exact derivative by every variable (forward-mode dual number). */
export interface Dual {
	readonly value: number;
	readonly slopes: readonly number[];
}

type Evaluate = (x: Vector) => number;
type EvaluateDual = (x: Vector) => Dual;

/** Turns a tree into a function of the execution; the tree is walked once, here. */
export function compileValue(tree: Expression): Evaluate {
	switch (tree.kind) {
		case 'number':
			return () => tree.value;
		case 'variable':
			return (x) => entry(x, tree.index);
		case 'negate': {
			const of = compileValue(tree.of);
			return (x) => -of(x);
		}
		case 'operation':
			return compileOperation(tree.operator, compileValue(tree.left), compileValue(tree.right));
		case 'call':
			return compileCall(tree);
	}
}

function compileOperation(operator: Operator, left: Evaluate, right: Evaluate): Evaluate {
	switch (operator) {
		case '+':
			return (x) => left(x) + right(x);
		case '-':
			return (x) => left(x) - right(x);
		case '*':
			return (x) => left(x) * right(x);
		case '/':
			return (x) => left(x) / right(x);
		case '^':
			return (x) => left(x) ** right(x);
	}
}

function compileCall({ name, parts }: Extract<Expression, { kind: 'call' }>): Evaluate {
	const [first, second] = parts.map(compileValue);
	if (!first) throw new RangeError(`${name} without a value`);
	if (name !== 'atan2' && name !== 'min' && name !== 'max') {
		const { value } = ONE_VALUE[name];
		return (x) => value(first(x));
	}
	if (!second) throw new RangeError(`${name} without a second value`);
	const { value } = TWO_VALUES[name];
	return (x) => value(first(x), second(x));
}

/**
 * Turns a tree into a function that gives the value and its exact gradient.
 *
 * Method:  forward-mode dual numbers, no differencing.
 * Source:  method sheet A7; Griewank & Walther, Evaluating Derivatives, chapter 3.
 * Accuracy: rounding only; compared with finite differences in formula.property.test.ts.
 */
export function compileDual(tree: Expression, variableCount: number): EvaluateDual {
	const none = new Array<number>(variableCount).fill(0);
	switch (tree.kind) {
		case 'number':
			return () => ({ value: tree.value, slopes: none });
		case 'variable': {
			const slopes = none.map((_, i) => (i === tree.index ? 1 : 0));
			return (x) => ({ value: entry(x, tree.index), slopes });
		}
		case 'negate': {
			const of = compileDual(tree.of, variableCount);
			return (x) =>
				chain(
					of(x),
					(value) => -value,
					() => -1
				);
		}
		case 'operation': {
			const left = compileDual(tree.left, variableCount);
			const right = compileDual(tree.right, variableCount);
			return (x) => combine(tree.operator, left(x), right(x));
		}
		case 'call':
			return compileDualCall(tree, variableCount);
	}
}

function compileDualCall(
	{ name, parts }: Extract<Expression, { kind: 'call' }>,
	variableCount: number
): EvaluateDual {
	const [first, second] = parts.map((part) => compileDual(part, variableCount));
	if (!first) throw new RangeError(`${name} without a value`);
	if (name !== 'atan2' && name !== 'min' && name !== 'max') {
		const { value, slope } = ONE_VALUE[name];
		return (x) => chain(first(x), value, slope);
	}
	if (!second) throw new RangeError(`${name} without a second value`);
	const { value, slopes } = TWO_VALUES[name];
	return (x) => join(first(x), second(x), value, slopes);
}

function combine(operator: Operator, a: Dual, b: Dual): Dual {
	switch (operator) {
		case '+':
			return join(
				a,
				b,
				(u, v) => u + v,
				() => [1, 1]
			);
		case '-':
			return join(
				a,
				b,
				(u, v) => u - v,
				() => [1, -1]
			);
		case '*':
			return join(
				a,
				b,
				(u, v) => u * v,
				(u, v) => [v, u]
			);
		case '/':
			return join(
				a,
				b,
				(u, v) => u / v,
				(u, v) => [1 / v, -u / (v * v)]
			);
		case '^':
			return raise(a, b);
	}
}

/** a^b; the logarithm is taken only where the exponent really varies, so (-2)^2 has a slope. */
function raise(a: Dual, b: Dual): Dual {
	const isConstant = b.slopes.every((slope) => slope === 0);
	return join(
		a,
		b,
		(u, v) => u ** v,
		(u, v) => [v === 0 ? 0 : v * u ** (v - 1), isConstant ? 0 : u ** v * Math.log(u)]
	);
}

function chain(a: Dual, value: (x: number) => number, slope: (x: number) => number): Dual {
	const factor = slope(a.value);
	return { value: value(a.value), slopes: a.slopes.map((s) => times(factor, s)) };
}

function join(
	a: Dual,
	b: Dual,
	value: (u: number, v: number) => number,
	slopes: (u: number, v: number) => readonly [number, number]
): Dual {
	const [du, dv] = slopes(a.value, b.value);
	return {
		value: value(a.value, b.value),
		slopes: a.slopes.map((s, i) => times(du, s) + times(dv, entry(b.slopes, i)))
	};
}

/** A part that does not depend on a variable adds nothing, even where its own factor is infinite. */
function times(factor: number, slope: number): number {
	return slope === 0 ? 0 : factor * slope;
}
