import { findSmallestN } from '../../../../power/smallest-n.ts';
import { OneOf, type Answers } from '../../topic.ts';
import { readNumber as number, readSides, type Row } from './rows.ts';

/** Names of what every test of a power case may say. */
export const TEST = ['alpha', 'sides', 'tails', 'strict'] as const;

export function readTest(row: Row) {
	return { alpha: number(row, 'alpha', 0.05), sides: readSides(row) };
}

/** Both ways to count the wrong tail where a case does not say which it means. */
export function withStrict(row: Row, compute: (strict: boolean) => number): unknown {
	const strict = row['strict'];
	if (typeof strict === 'boolean') return compute(strict);
	return new OneOf(compute(true), compute(false));
}

export function solve(
	power: number,
	smallest: number,
	computePower: (n: number) => number
): number {
	const found = findSmallestN({ computePower, power, smallest });
	if (!found.ok) throw new RangeError(`no n reaches that power: ${found.reason}`);
	return found.exactN;
}

export function rounded(name: string, exact: unknown): Answers {
	const up = (value: unknown) => (typeof value === 'number' ? Math.ceil(value - 1e-9) : value);
	const whole = exact instanceof OneOf ? new OneOf(...exact.values.map(up)) : up(exact);
	return { [name]: exact, n: exact, [`${name}_rounded`]: whole, n_ceiling: whole };
}
