export type LeafValue = string | number | boolean | null;

/**
 * Every single value of a JSON document by its path, such as `visits.3.minutes`. List places count
 * from 1; an empty list or object is a leaf of its own, so that nothing of a document is left out.
 */
export function readLeaves(value: unknown): Map<string, string> {
	return new Map(walk(value, ''));
}

function walk(value: unknown, path: string): [string, string][] {
	if (value === undefined) return [];
	if (Array.isArray(value)) {
		if (value.length === 0) return [[path, 'none']];
		return value.flatMap((part, index) => walk(part, join(path, String(index + 1))));
	}
	if (value !== null && typeof value === 'object') {
		const parts = Object.entries(value).filter(([, part]) => part !== undefined);
		if (parts.length === 0) return [[path, 'nothing']];
		return parts.flatMap(([key, part]) => walk(part, join(path, key)));
	}
	return [[path, showLeaf(value as LeafValue)]];
}

const join = (path: string, step: string) => (path === '' ? step : `${path}.${step}`);

function showLeaf(value: LeafValue): string {
	if (value === null) return 'not set';
	if (typeof value === 'boolean') return value ? 'yes' : 'no';
	return value === '' ? 'empty' : String(value);
}

/** `policy.place.coverMax` as 'policy, place, cover max': for values that have no words of their own. */
export function nameLeaf(path: string): string {
	return path
		.split('.')
		.map((step) =>
			step
				.replace(/([a-z])([A-Z])/g, '$1 $2')
				.replaceAll('-', ' ')
				.toLowerCase()
		)
		.join(', ');
}
