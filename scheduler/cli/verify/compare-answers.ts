import { HOW_CHECKED, Judged, OneOf } from './topic.ts';

export interface CaseTolerance {
	readonly abs?: number | undefined;
	readonly rel?: number | undefined;
}

/** One value that is not as expected. */
export interface Fault {
	/** Where in `expected`, for instance rows[2].trace. */
	readonly path: string;
	readonly got: unknown;
	readonly expected: unknown;
	readonly tolerance: CaseTolerance;
}

type ToleranceAt = (path: readonly string[]) => CaseTolerance;

/** Smallest expected size that a relative tolerance is taken of. */
const RELATIVE_FLOOR = 1e-12;

/**
 * Compares everything that a case expects with what was computed; more may have been computed.
 *
 * Method:  a number passes within abs, or within rel × max(|expected|, 1e-12), if either is given;
 *          lists element by element; all else exactly. A list of one stands for its element.
 * Source:  method sheet F.
 */
export function compareAnswers(
	got: unknown,
	expected: unknown,
	toleranceAt: ToleranceAt,
	path: readonly string[] = []
): Fault[] {
	if (got === HOW_CHECKED) return [];
	if (got instanceof OneOf) return compareOneOf(got, expected, toleranceAt, path);
	if (got instanceof Judged) return compareJudged(got, expected, toleranceAt, path);
	const tolerance = toleranceAt(path);
	const fault = { path: writePath(path), got: got ?? null, expected, tolerance };
	if (Array.isArray(expected) !== Array.isArray(got))
		return compareUnwrapped(got, expected, toleranceAt, path) ?? [fault];
	if (typeof expected === 'number' && typeof got === 'number')
		return isWithin(got, expected, tolerance) ? [] : [fault];
	if (typeof expected !== 'object' || expected === null) return got === expected ? [] : [fault];
	if (typeof got !== 'object' || got === null) return [fault];
	if (Array.isArray(expected) && expected.length !== Object.keys(got).length) return [fault];
	return Object.entries(expected).flatMap(([name, inside]) =>
		compareAnswers(Reflect.get(got, name), inside, toleranceAt, [...path, name])
	);
}

/** A list of one against its element; undefined when that is not what they are. */
function compareUnwrapped(
	got: unknown,
	expected: unknown,
	toleranceAt: ToleranceAt,
	path: readonly string[]
): Fault[] | undefined {
	if (Array.isArray(got) && got.length === 1 && typeof expected !== 'object')
		return compareAnswers(got[0], expected, toleranceAt, path);
	if (Array.isArray(expected) && expected.length === 1 && typeof got !== 'object')
		return compareAnswers(got, expected[0], toleranceAt, path);
	return undefined;
}

/** No fault when one of the answers has none; else those of the first. */
function compareOneOf(
	{ values }: OneOf,
	expected: unknown,
	toleranceAt: ToleranceAt,
	path: readonly string[]
): Fault[] {
	const found = values.map((value) => compareAnswers(value, expected, toleranceAt, path));
	return found.find(({ length }) => length === 0) ?? found[0] ?? [];
}

function compareJudged(
	{ value, tolerance, isSignFree }: Judged,
	expected: unknown,
	toleranceAt: ToleranceAt,
	path: readonly string[]
): Fault[] {
	const at: ToleranceAt = tolerance ? () => tolerance : toleranceAt;
	const faults = compareAnswers(value, expected, at, path);
	if (faults.length === 0 || !isSignFree) return faults;
	return compareAnswers(negate(value), expected, at, path).length === 0 ? [] : faults;
}

function negate(value: unknown): unknown {
	if (Array.isArray(value)) return value.map(negate);
	return typeof value === 'number' ? -value : value;
}

function isWithin(got: number, expected: number, { abs, rel }: CaseTolerance): boolean {
	if (Object.is(got, expected)) return true;
	const difference = Math.abs(got - expected);
	if (difference <= (abs ?? 0)) return true;
	return rel !== undefined && difference <= rel * Math.max(Math.abs(expected), RELATIVE_FLOOR);
}

function writePath(path: readonly string[]): string {
	return path
		.map((part, i) => (/^\d+$/.test(part) ? `[${part}]` : `${i === 0 ? '' : '.'}${part}`))
		.join('');
}
