import { expect } from 'vitest';

/**
 * Expects everything that `wanted` names, at every depth: numbers within the absolute tolerance of
 * their name (exactly when it has none), everything else equal. `got` may hold more.
 */
export function expectLike(
	got: unknown,
	wanted: unknown,
	tolerances: Readonly<Record<string, number>>,
	path: readonly string[] = []
): void {
	const place = path.join('.') || 'value';
	if (typeof wanted === 'number')
		return expectNumber(got, wanted, findTolerance(path, tolerances), place);
	if (typeof wanted !== 'object' || wanted === null) return expect(got, place).toEqual(wanted);
	expect(got, place).toBeTypeOf('object');
	if (Array.isArray(wanted)) expect(got, place).toHaveLength(wanted.length);
	for (const [name, inside] of Object.entries(wanted))
		expectLike(Reflect.get(Object(got), name), inside, tolerances, [...path, name]);
}

function expectNumber(got: unknown, wanted: number, tolerance: number, place: string): void {
	expect(got, place).toBeTypeOf('number');
	expect(Math.abs(Number(got) - wanted), `${place}: ${got} against ${wanted}`).toBeLessThanOrEqual(
		tolerance
	);
}

/** The nearest name on the path that has a tolerance. */
function findTolerance(path: readonly string[], tolerances: Readonly<Record<string, number>>) {
	const name = path.findLast((part) => tolerances[part] !== undefined);
	return name === undefined ? 0 : (tolerances[name] ?? 0);
}
