import { z } from 'zod';
import type { Answers, Inputs, Topic } from '../../topic.ts';

/** One row of inputs that run in parallel. */
export type Row = Readonly<Record<string, number | string | boolean>>;

const scalar = z.union([z.number(), z.string(), z.boolean()]);
const parallelSchema = z.record(z.string(), z.union([scalar, z.array(scalar).min(1)]));

/**
 * A topic for inputs that run in parallel: each list gives one value a row, each single value counts
 * for all rows. Inputs are known by their names: all of `needed` must be there, and none beyond them
 * and `optional`. Answers of the rows are gathered by name.
 */
export function forRows(
	names: { needed: readonly string[]; optional?: readonly string[] },
	compute: (row: Row) => Answers
): Topic {
	return (inputs) => {
		if (!hasNames(inputs, names)) return undefined;
		const columns = parallelSchema.parse(inputs);
		const lists = Object.values(columns).filter((value) => Array.isArray(value));
		const count = Math.max(1, ...lists.map(({ length }) => length));
		if (lists.some(({ length }) => length !== 1 && length !== count))
			throw new RangeError('the lists differ in length');
		const rows = Array.from({ length: count }, (_, i) => compute(readRow(columns, i)));
		const [first = {}] = rows;
		if (count === 1) return first;
		return Object.fromEntries(
			Object.keys(first).map((name) => [name, rows.map((row) => row[name])])
		);
	};
}

const rowListSchema = z.array(z.record(z.string(), scalar)).min(1);

/** A topic whose inputs may also stand row by row, under the one name `rows`. */
export function inRows(topic: Topic): Topic {
	return (inputs, datasets) => {
		if (Object.keys(inputs).join() !== 'rows') return topic(inputs, datasets);
		const rows = rowListSchema.parse(inputs['rows']);
		const names = Object.keys(rows[0] ?? {});
		const columns = names.map((name) => [name, rows.map((row) => row[name])]);
		return topic(Object.fromEntries(columns), datasets);
	};
}

function hasNames(
	inputs: Inputs,
	{ needed, optional = [] }: { needed: readonly string[]; optional?: readonly string[] }
): boolean {
	const given = Object.keys(inputs);
	const known = [...needed, ...optional];
	return (
		needed.every((name) => given.includes(name)) && given.every((name) => known.includes(name))
	);
}

function readRow(columns: z.output<typeof parallelSchema>, i: number): Row {
	return Object.fromEntries(
		Object.entries(columns).map(([name, value]) => {
			const own = Array.isArray(value) ? value[value.length === 1 ? 0 : i] : value;
			return [name, own ?? Number.NaN];
		})
	);
}

/** A number of a row; a default where it may be missing. */
export function readNumber(row: Row, name: string, missing?: number): number {
	const value = row[name] ?? missing;
	if (typeof value === 'number') return value;
	throw new RangeError(`“${name}” must be a number, got ${String(value)}`);
}

/** One or two sides of a row; two where nothing is said. */
export function readSides(row: Row): 1 | 2 {
	const sides = row['sides'] ?? row['tails'] ?? 2;
	if (sides === 1 || sides === 2) return sides;
	throw new RangeError(`“sides” must be 1 or 2, got ${String(sides)}`);
}
