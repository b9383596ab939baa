import { repeat } from './topic.ts';

/**
 * Computes one answer for each place of inputs that may be lists, and gives the answers as lists; as single
 * values where every input is one.
 *
 * @param lists inputs that run in parallel; a list of one goes with all
 * @throws {RangeError} lists of different length
 */
export function answerEach<Name extends string>(
	lists: Readonly<Record<Name, readonly number[]>>,
	compute: (one: Record<Name, number>) => Readonly<Record<string, unknown>>
): Record<string, unknown> {
	const names = Object.keys(lists).filter((name): name is Name => name in lists);
	const count = Math.max(...names.map((name) => lists[name].length));
	const wrong = names.find((name) => ![1, count].includes(lists[name].length));
	if (wrong) throw new RangeError(`${wrong} has ${lists[wrong].length} values, others ${count}`);
	const columns = names.map((name) => [name, repeat(lists[name], count)] as const);
	const answers = Array.from({ length: count }, (_, i) => compute(readPlace(columns, i)));
	const [first = {}] = answers;
	if (count === 1) return { ...first };
	return Object.fromEntries(
		Object.keys(first).map((name) => [name, answers.map((answer) => answer[name])])
	);
}

function readPlace<Name extends string>(
	columns: readonly (readonly [Name, readonly number[]])[],
	i: number
): Record<Name, number> {
	const one: Partial<Record<Name, number>> = {};
	for (const [name, values] of columns) one[name] = values[i] ?? Number.NaN;
	return requireAll(
		one,
		columns.map(([name]) => name)
	);
}

function requireAll<Name extends string>(
	one: Partial<Record<Name, number>>,
	names: readonly Name[]
): Record<Name, number> {
	const isComplete = (value: Partial<Record<Name, number>>): value is Record<Name, number> =>
		names.every((name) => value[name] !== undefined);
	if (!isComplete(one)) throw new RangeError('a list is shorter than the others');
	return one;
}
