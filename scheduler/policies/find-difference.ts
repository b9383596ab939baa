import { canonicalJson } from './canonical-json.ts';

export interface Difference {
	/** Where: names and 0-based places from the outside in. */
	readonly path: readonly (string | number)[];
	/** Null where that side has nothing. */
	readonly stored: unknown;
	readonly current: unknown;
}

/**
 * The first place at which two pieces of plain data differ, in canonical order; null when equal.
 */
export function findDifference(
	stored: unknown,
	current: unknown,
	path: readonly (string | number)[] = []
): Difference | null {
	if (isBranch(stored) && isBranch(current) && Array.isArray(stored) === Array.isArray(current))
		return findInside(stored, current, path);
	if (textOf(stored) === textOf(current)) return null;
	return { path, stored: stored ?? null, current: current ?? null };
}

function findInside(stored: object, current: object, path: readonly (string | number)[]) {
	for (const name of listNames(stored, current)) {
		const place = Array.isArray(stored) ? Number(name) : name;
		const difference = findDifference(Reflect.get(stored, name), Reflect.get(current, name), [
			...path,
			place
		]);
		if (difference) return difference;
	}
	return null;
}

function listNames(stored: object, current: object): string[] {
	const names = [...new Set([...Object.keys(stored), ...Object.keys(current)])];
	return Array.isArray(stored) ? names : names.sort();
}

function isBranch(value: unknown): value is object {
	return typeof value === 'object' && value !== null;
}

function textOf(value: unknown): string {
	return value === undefined ? '' : canonicalJson(value);
}

/** A path as people write it, for instance state.last.trials[3][0]. */
export function writePath(path: readonly (string | number)[]): string {
	return path
		.map((part, i) => (typeof part === 'number' ? `[${part}]` : i === 0 ? part : `.${part}`))
		.join('');
}
