import { compileValue } from '../tasks/formula/compile-formula.ts';
import { parseFormula } from '../tasks/formula/parse-formula.ts';

/** Columns of data by name: numbers, or text for groups and conditions. */
export type DataColumns = Readonly<Record<string, readonly (number | string)[]>>;

/** A formula such as `y ~ day * arm + (1 + day | person)`, with its columns computed. */
export type ModelFrame = {
	outcome: number[];
	/** Name and values of each fixed effect; the intercept is called `intercept`. */
	fixed: { name: string; values: number[] }[];
	/** The random part; null when there is none. */
	random: { group: string; groups: string[]; columns: { name: string; values: number[] }[] } | null;
};

type NamedColumn = { name: string; values: number[] };

/**
 * Computes the columns of a model formula.
 *
 * Shapes:  formula and columns (n values each) in; outcome, fixed and random columns (n) out.
 * Method:  terms joined by +; `1` and `0` for the intercept; `a:b` interaction, `a*b` both and their
 *          interaction; a bracket or I(...) holds arithmetic, such as (age - 11); text becomes one
 *          column for each value but the first in alphabetical order. One random term
 *          (terms | group). Nothing of a formula is executed.
 * Source:  the notation of G. Wilkinson and C. Rogers, Applied Statistics 22 (1973).
 * Accuracy: exact; scheduler/analysis/model-formula.test.ts.
 * @throws {RangeError} a formula that cannot be read, an unknown column, or columns of no use
 */
export function buildModelFrame(formula: string, data: DataColumns): ModelFrame {
	const [left, right, ...more] = formula.split('~').map((side) => side.trim());
	if (!left || !right || more.length > 0)
		throw new RangeError(`a model formula has one ~ between outcome and effects: “${formula}”`);
	const rowCount = data[Object.keys(data)[0] ?? '']?.length ?? 0;
	const terms = splitTop(right, '+');
	const randomTerms = terms.filter((term) => isRandom(term));
	if (randomTerms.length > 1) throw new RangeError('only one random term (… | group) is possible');
	const fixed = buildColumns(
		terms.filter((term) => !isRandom(term)),
		data,
		rowCount
	);
	const [random] = randomTerms;
	return {
		outcome: computeNumbers(left, data, rowCount),
		fixed,
		random: random === undefined ? null : readRandom(random, data, rowCount)
	};
}

function isRandom(term: string): boolean {
	return term.includes('|');
}

function readRandom(term: string, data: DataColumns, rowCount: number): ModelFrame['random'] {
	const inner = stripBracket(term);
	if (inner === null || term.includes('||'))
		throw new RangeError(`a random term is written (1 + day | person), got “${term}”`);
	const [left = '', group = '', ...more] = inner.split('|').map((side) => side.trim());
	if (more.length > 0 || left === '' || group === '')
		throw new RangeError(`a random term is written (1 + day | person), got “${term}”`);
	const groups = readColumn(group, data).map(String);
	return { group, groups, columns: buildColumns(splitTop(left, '+'), data, rowCount) };
}

function buildColumns(
	terms: readonly string[],
	data: DataColumns,
	rowCount: number
): NamedColumn[] {
	const hasIntercept = !terms.some((term) => term === '0' || term === '-1');
	const rest = terms.filter((term) => !['0', '1', '-1'].includes(term));
	const columns: NamedColumn[] = hasIntercept
		? [{ name: 'intercept', values: new Array<number>(rowCount).fill(1) }]
		: [];
	for (const term of rest.flatMap(expandStar).toSorted(byOrder))
		for (const column of multiplyFactors(splitTop(term, ':'), data, rowCount))
			if (!columns.some(({ name }) => name === column.name)) columns.push(column);
	if (columns.length === 0) throw new RangeError('the formula has no effect');
	return columns;
}

/** a*b stands for a + b + a:b. */
function expandStar(term: string): string[] {
	const parts = splitTop(term, '*');
	return parts.reduce<string[]>(
		(before, part) => [...before, part, ...before.map((other) => `${other}:${part}`)],
		[]
	);
}

/** Main effects before interactions; equal ones stay in their order. */
function byOrder(a: string, b: string): number {
	return splitTop(a, ':').length - splitTop(b, ':').length;
}

function multiplyFactors(
	factors: readonly string[],
	data: DataColumns,
	rowCount: number
): NamedColumn[] {
	return factors
		.map((factor) => readFactor(factor, data, rowCount))
		.reduce((left, right) =>
			left.flatMap((a) =>
				right.map((b) => ({
					name: `${a.name}:${b.name}`,
					values: a.values.map((value, i) => value * (b.values[i] ?? Number.NaN))
				}))
			)
		);
}

function readFactor(factor: string, data: DataColumns, rowCount: number): NamedColumn[] {
	const values = Object.hasOwn(data, factor) ? data[factor] : undefined;
	if (!values?.some((value) => typeof value === 'string'))
		return [{ name: factor, values: computeNumbers(factor, data, rowCount) }];
	const levels = [...new Set(values.map(String))].toSorted();
	if (levels.length < 2) throw new RangeError(`“${factor}” has the same value in every row`);
	return levels.slice(1).map((level) => ({
		name: `${factor}=${level}`,
		values: values.map((value) => (String(value) === level ? 1 : 0))
	}));
}

/** Arithmetic over numeric columns, row by row. */
function computeNumbers(text: string, data: DataColumns, rowCount: number): number[] {
	const names = Object.keys(data).filter((name) =>
		new RegExp(`(^|[^\\w.])${escape(name)}([^\\w.]|$)`).test(text)
	);
	if (Object.hasOwn(data, text)) return readNumbers(text, data);
	const plain = names.map((name, i) => [name, `v${i}x`] as const);
	const renamed = plain.reduce(
		(out, [name, short]) =>
			out.replace(new RegExp(`(?<![\\w.])${escape(name)}(?![\\w.])`, 'g'), short),
		text.replace(/^I\s*\(/, '(')
	);
	const parsed = parseFormula(
		renamed,
		plain.map(([, short]) => short)
	);
	if (!parsed.ok) throw new RangeError(`“${text}” cannot be read: ${parsed.message}`);
	const columns = names.map((name) => readNumbers(name, data));
	const evaluate = compileValue(parsed.expression);
	return Array.from({ length: rowCount }, (_, i) => {
		const value = evaluate(columns.map((column) => column[i] ?? Number.NaN));
		if (!Number.isFinite(value)) throw new RangeError(`“${text}” is no number in row ${i + 1}`);
		return value;
	});
}

function readNumbers(name: string, data: DataColumns): number[] {
	return readColumn(name, data).map((value, i) => {
		if (typeof value === 'number' && Number.isFinite(value)) return value;
		throw new RangeError(`“${name}” is no number in row ${i + 1}`);
	});
}

function readColumn(name: string, data: DataColumns): readonly (number | string)[] {
	const values = Object.hasOwn(data, name) ? data[name] : undefined;
	if (values) return values;
	throw new RangeError(`there is no column “${name}”; there are ${Object.keys(data).join(', ')}`);
}

function escape(name: string): string {
	return name.replace(/[.*+?^${}()|[\]\\]/g, '\\$&');
}

/** The inside when one pair of brackets holds the whole text, else null. */
function stripBracket(text: string): string | null {
	if (!text.startsWith('(') || !text.endsWith(')')) return null;
	let depth = 0;
	for (let i = 0; i < text.length - 1; i += 1) {
		if (text[i] === '(') depth += 1;
		if (text[i] === ')') depth -= 1;
		if (depth === 0) return null;
	}
	return text.slice(1, -1);
}

/** Parts between a sign that stands in no bracket. */
function splitTop(text: string, sign: '+' | ':' | '*'): string[] {
	const parts: string[] = [];
	let [depth, start] = [0, 0];
	for (let i = 0; i < text.length; i += 1) {
		if (text[i] === '(') depth += 1;
		if (text[i] === ')') depth -= 1;
		if (depth === 0 && text[i] === sign) {
			parts.push(text.slice(start, i).trim());
			start = i + 1;
		}
	}
	parts.push(text.slice(start).trim());
	if (depth !== 0) throw new RangeError(`brackets do not match in “${text}”`);
	if (parts.includes('')) throw new RangeError(`an effect is missing beside ${sign} in “${text}”`);
	return parts;
}
