import type { ProtocolDraft } from './protocol-draft';

type Sides = { base: unknown; theirs: unknown; mine: unknown };

/**
 * What two people made of one draft, together. Where both changed the same thing, or one of them a
 * list that the other made longer or shorter, mine stays; `clashes` counts these places.
 */
export function mergeDrafts(sides: {
	base: ProtocolDraft;
	theirs: ProtocolDraft;
	mine: ProtocolDraft;
}): { draft: ProtocolDraft; clashes: number } {
	const count = { clashes: 0 };
	return { draft: merge(sides, count) as ProtocolDraft, ...count };
}

function merge({ base, theirs, mine }: Sides, count: { clashes: number }): unknown {
	if (isSame(base, theirs) || isSame(theirs, mine)) return mine;
	if (isSame(base, mine)) return theirs;
	if (!isMergeable(base, theirs, mine)) {
		count.clashes += 1;
		return mine;
	}
	const sides = { base: base as Holder, theirs: theirs as Holder, mine: mine as Holder };
	const keys = [...new Set([...Object.keys(sides.mine), ...Object.keys(sides.theirs)])];
	const parts = keys.flatMap((key) => {
		const part = { base: sides.base[key], theirs: sides.theirs[key], mine: sides.mine[key] };
		const merged = merge(part, count);
		return merged === undefined ? [] : [[key, merged] as const];
	});
	return Array.isArray(mine) ? parts.map(([, part]) => part) : Object.fromEntries(parts);
}

type Holder = Record<string, unknown>;

/** Lists are merged place by place, so only while nobody put something in or took something out. */
function isMergeable(...values: unknown[]): boolean {
	if (!values.every((value) => typeof value === 'object' && value !== null)) return false;
	const lists = values.filter(Array.isArray);
	if (lists.length === 0) return true;
	return lists.length === values.length && new Set(lists.map(({ length }) => length)).size === 1;
}

function isSame(a: unknown, b: unknown): boolean {
	return a === b || JSON.stringify(a) === JSON.stringify(b);
}
