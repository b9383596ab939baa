/**
 * Paths of the single values in which two states differ, such as 'visits.2.blocks.0.trials'; null when
 * they differ in shape. Parts that both share are passed over.
 */
export function findChangedPlaces(before: unknown, after: unknown): string[] | null {
	const places: string[] = [];
	return collect(before, after, '', places) ? places : null;
}

function collect(before: unknown, after: unknown, path: string, places: string[]): boolean {
	if (before === after) return true;
	if (!isHolder(before) || !isHolder(after)) {
		places.push(path);
		return !isHolder(before) && !isHolder(after);
	}
	const keys = Object.keys(after);
	if (Array.isArray(before) !== Array.isArray(after)) return false;
	if (Object.keys(before).length !== keys.length) return false;
	return keys.every(
		(key) =>
			Object.hasOwn(before, key) &&
			collect(before[key], after[key], path === '' ? key : `${path}.${key}`, places)
	);
}

function isHolder(value: unknown): value is Record<string, unknown> {
	return typeof value === 'object' && value !== null;
}
