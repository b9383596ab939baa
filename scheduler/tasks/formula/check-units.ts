import type { FunctionName } from './formula-functions.ts';
import type { Expression } from './parse-formula.ts';
import {
	isSameKind,
	NO_DIMENSION,
	power,
	product,
	readUnit,
	writeKind,
	type Dimension
} from './read-unit.ts';

/** Something about the units of a formula that a careful colleague would point out. */
export interface UnitNote {
	readonly code:
		/** Two terms of different kind are added, subtracted or compared: m and m/s. */
		| 'mixed-sum'
		/** They agree only if the plain numbers among their factors carry a unit themselves. */
		| 'sum-needs-number-unit'
		/** One kind, two sizes: m and cm. */
		| 'different-size'
		/** A function of a pure number is given something with a unit. */
		| 'unit-in-function'
		/** sin, cos and tan take radians; this is in degrees. */
		| 'degrees-as-radians'
		/** A power whose exponent is a variable, of something with a unit. */
		| 'variable-power'
		/** The formula gives another kind of quantity than the result is said to have. */
		| 'result-unit'
		/** A text given as a unit is none. */
		| 'unreadable-unit';
	/** The two sides, or what was found and what was wanted. */
	readonly left: string;
	readonly right: string;
}

/** Units of one part of a formula. */
interface Measure {
	/** Null where nothing can be said; any unit fits a plain number that stands alone. */
	readonly kind: Dimension | null;
	/** Whether a plain number other than a count is among the factors: it may carry a unit. */
	readonly hasNumber: boolean;
	/** The value where it does not depend on a variable. */
	readonly value: number | null;
	readonly text: string;
}

const ANY: Omit<Measure, 'text'> = { kind: null, hasNumber: false, value: null };

/**
 * What is odd about the units of a formula, over the units of its variables.
 *
 * Method:  dimensional analysis of the expression tree. A number that stands alone in a sum fits any unit; a
 *          number that multiplies has none, but when the sum then fails it is said that it fits only if the
 *          number carries one. An unknown unit's name counts as a quantity of its own. Angles have none.
 * Source:  method sheet A7; check-units.test.ts.
 * @param names the variables' names, in the order of the units
 * @example checkUnits(tree of 'x + v', { names: ['x', 'v'], units: ['m', 'm/s'], resultUnit: 'm' })
 */
export function checkUnits(
	tree: Expression,
	{
		names,
		units,
		resultUnit
	}: { names: readonly string[]; units: readonly string[]; resultUnit: string }
): UnitNote[] {
	const notes: UnitNote[] = [];
	const kinds = units.map((unit) => {
		const kind = readUnit(unit);
		if (!kind) notes.push({ code: 'unreadable-unit', left: unit, right: '' });
		return kind;
	});
	const whole = measure(tree, { names, kinds, notes });
	const wanted = readUnit(resultUnit);
	if (!wanted) notes.push({ code: 'unreadable-unit', left: resultUnit, right: '' });
	else if (whole.kind) {
		const right = resultUnit || 'no unit';
		if (!isSameKind(whole.kind, wanted)) {
			const code = whole.hasNumber ? 'sum-needs-number-unit' : 'result-unit';
			notes.push({ code, left: describe(whole), right: `the result, ${right}` });
		} else if (!isSameSize(whole.kind, wanted) && !whole.hasNumber)
			notes.push({ code: 'different-size', left: describe(whole), right: `the result, ${right}` });
	}
	return removeTwins(notes);
}

interface Context {
	readonly names: readonly string[];
	readonly kinds: readonly (Dimension | null)[];
	readonly notes: UnitNote[];
}

function measure(tree: Expression, context: Context): Measure {
	switch (tree.kind) {
		case 'number':
			return { ...ANY, value: tree.value, text: write(tree.value) };
		case 'variable':
			return {
				...ANY,
				kind: context.kinds[tree.index] ?? null,
				text: context.names[tree.index] ?? ''
			};
		case 'negate': {
			const of = measure(tree.of, context);
			return { ...of, value: of.value === null ? null : -of.value, text: `−${of.text}` };
		}
		case 'operation':
			return measureOperation(tree, context);
		case 'call':
			return measureCall(tree.name, tree.parts, context);
	}
}

function measureOperation(
	{ operator, left, right }: Extract<Expression, { kind: 'operation' }>,
	context: Context
): Measure {
	const [a, b] = [measure(left, context), measure(right, context)];
	if (operator === '^') return measurePower(a, b, context);
	if (operator === '+' || operator === '-')
		return { ...join(a, b, context), text: `${a.text} ${operator === '+' ? '+' : '−'} ${b.text}` };
	const sign = operator === '*' ? 1 : -1;
	const text = `${bracket(a)}${operator === '*' ? '·' : '/'}${bracket(b)}`;
	if (a.value !== null && b.value !== null)
		return { ...ANY, value: operator === '*' ? a.value * b.value : a.value / b.value, text };
	const hasNumber = a.hasNumber || b.hasNumber || isFactor(a) || isFactor(b);
	const kind =
		(a.kind === null && a.value === null) || (b.kind === null && b.value === null)
			? null
			: product(a.kind ?? NO_DIMENSION, power(b.kind ?? NO_DIMENSION, sign));
	return { kind, hasNumber, value: null, text };
}

/** A number among factors that may stand for something with a unit: not a small count such as 2 or 4. */
function isFactor({ value }: Measure): boolean {
	return value !== null && !(Number.isInteger(value) && Math.abs(value) <= 4);
}

function measurePower(a: Measure, b: Measure, context: Context): Measure {
	const text = `${bracket(a)}^${bracket(b)}`;
	if (a.value !== null && b.value !== null) return { ...ANY, value: a.value ** b.value, text };
	requirePure(b, context);
	if (b.value !== null) return { ...a, kind: a.kind && power(a.kind, b.value), value: null, text };
	if (a.kind && !isSameKind(a.kind, NO_DIMENSION))
		context.notes.push({ code: 'variable-power', left: describe(a), right: b.text });
	return { ...ANY, kind: NO_DIMENSION, text };
}

/** Terms of a sum, of min and max, and the two sides of atan2. */
function join(a: Measure, b: Measure, { notes }: Context): Omit<Measure, 'text'> {
	const hasNumber = a.hasNumber || b.hasNumber;
	const value = a.value !== null && b.value !== null ? a.value + b.value : null;
	if (value !== null) return { ...ANY, value };
	if (!a.kind || !b.kind) return { kind: a.kind ?? b.kind, hasNumber, value: null };
	if (!isSameKind(a.kind, b.kind)) {
		const code = hasNumber ? 'sum-needs-number-unit' : 'mixed-sum';
		notes.push({ code, left: describe(a), right: describe(b) });
		// What is mixed has no unit that could be compared any further.
		return ANY;
	}
	if (!isSameSize(a.kind, b.kind) && !hasNumber)
		notes.push({ code: 'different-size', left: describe(a), right: describe(b) });
	return { kind: a.kind, hasNumber, value: null };
}

function measureCall(name: FunctionName, parts: readonly Expression[], context: Context): Measure {
	const [first, second] = parts.map((part) => measure(part, context));
	if (!first) return { ...ANY, text: name };
	const text = `${name}(${[first, second].flatMap((part) => (part ? [part.text] : [])).join(', ')})`;
	const pure: Measure = { ...ANY, kind: NO_DIMENSION, text };
	switch (name) {
		case 'abs':
			return { ...first, text };
		case 'sqrt':
			return { ...first, kind: first.kind && power(first.kind, 0.5), value: null, text };
		case 'min':
		case 'max':
			return second ? { ...join(first, second, context), text } : pure;
		case 'atan2':
			if (second) join(first, second, context);
			return pure;
		case 'sin':
		case 'cos':
		case 'tan':
			if (isInDegrees(first))
				context.notes.push({ code: 'degrees-as-radians', left: first.text, right: name });
			else requirePure(first, context, name);
			return pure;
		case 'asin':
		case 'acos':
		case 'atan':
		case 'exp':
		case 'log':
			requirePure(first, context, name);
			return pure;
	}
}

function isInDegrees({ kind, hasNumber }: Measure): boolean {
	if (!kind || hasNumber || !isSameKind(kind, NO_DIMENSION)) return false;
	return Math.abs(kind.size - Math.PI / 180) < 1e-9;
}

function requirePure(part: Measure, { notes }: Context, name = 'a power'): void {
	if (!part.kind || part.hasNumber || isSameKind(part.kind, NO_DIMENSION)) return;
	notes.push({ code: 'unit-in-function', left: describe(part), right: name });
}

function isSameSize(a: Dimension, b: Dimension): boolean {
	return Math.abs(a.size / b.size - 1) < 1e-9;
}

function describe({ text, kind }: Measure): string {
	const short = text.length > 48 ? `${text.slice(0, 45)}…` : text;
	return kind ? `${short} (${writeKind(kind)})` : short;
}

function bracket({ text }: Measure): string {
	return / /.test(text) && !/^\w+\(.*\)$/.test(text) ? `(${text})` : text;
}

function write(value: number): string {
	return value === Math.PI ? 'π' : String(value);
}

function removeTwins(notes: readonly UnitNote[]): UnitNote[] {
	const keys = notes.map((note) => JSON.stringify(note));
	return notes.filter((_, index) => keys.indexOf(keys[index] ?? '') === index);
}
