import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import {
	findForbiddenPartner,
	findLevels,
	items,
	levels,
	seesArms,
	viewerRoles,
	type Item,
	type ViewerRole
} from './visibility';

type Cell = string | string[];
type Table = {
	items: Record<string, Record<string, Cell>>;
	variants: Record<string, { changes?: Record<string, Record<string, Cell>> }>;
	'never-in-one-study-now-or-earlier': {
		a: string;
		b: string[];
		unless?: string;
		when?: string;
	}[];
};
// Read as text, so that what is compared did not go through the module under test.
const table = JSON.parse(
	readFileSync(new URL('./visibility.json', import.meta.url), 'utf8')
) as Table;
const asSet = (cell: Cell) => new Set(Array.isArray(cell) ? cell : [cell]);
const cells = Object.entries(table.items).flatMap(([item, row]) =>
	Object.entries(row).map(([role, cell]) => ({ item, role, cell }))
);

test.each(cells)('$role sees $item as the table says', ({ item, role, cell }) => {
	expect(findLevels([role as ViewerRole], item as Item)).toEqual(asSet(cell));
});

test('every item has a cell for every role, made of known levels', () => {
	for (const row of Object.values(table.items)) {
		expect(Object.keys(row).toSorted()).toEqual([...viewerRoles].toSorted());
	}
	const used = cells.flatMap(({ cell }) => [...asSet(cell)]);
	expect(used.filter((level) => !(levels as string[]).includes(level))).toEqual([]);
	expect(items.length).toBe(Object.keys(table.items).length);
});

test('several roles see the union of their cells', () => {
	const pairs = viewerRoles.flatMap((a) => viewerRoles.map((b) => [a, b] as const));
	for (const item of items) {
		for (const [a, b] of pairs) {
			const union = new Set([...findLevels([a], item), ...findLevels([b], item)]);
			if (union.size > 1) union.delete('none');
			expect(findLevels([a, b], item)).toEqual(union);
		}
	}
});

test('nobody at all sees nothing', () => {
	for (const item of items) expect(findLevels([], item)).toEqual(new Set(['none']));
});

describe('a variant that the protocol declares', () => {
	const changed = Object.entries(table.variants).flatMap(([variant, { changes }]) =>
		Object.entries(changes ?? {}).flatMap(([role, row]) =>
			Object.entries(row).map(([item, cell]) => ({ variant, role, item, cell }))
		)
	);

	test.each(changed)('$variant lets $role see $item so', ({ variant, role, item, cell }) => {
		expect(findLevels([role as ViewerRole], item as Item, [variant])).toEqual(asSet(cell));
	});

	test('changes nothing but what it says', () => {
		for (const variant of Object.keys(table.variants)) {
			for (const { item, role, cell } of cells) {
				if (table.variants[variant]?.changes?.[role]?.[item] !== undefined) continue;
				expect(findLevels([role as ViewerRole], item as Item, [variant])).toEqual(asSet(cell));
			}
		}
	});
});

describe('roles that must not meet', () => {
	const pairs = table['never-in-one-study-now-or-earlier'].flatMap(({ a, b, unless, when }) =>
		(b.includes('*') ? viewerRoles.filter((role) => role !== a) : b).map((other) => ({
			a: a as ViewerRole,
			b: other as ViewerRole,
			variants: when ? [when] : [],
			lifted: unless ?? null
		}))
	);

	test.each(pairs)('$a and $b are refused, whichever came first', ({ a, b, variants }) => {
		expect(findForbiddenPartner([a], b, variants)).toBe(b === a ? null : a);
		expect(findForbiddenPartner([b], a, variants)).toBe(b);
	});

	test('a variant lifts only the pairs that name it', () => {
		for (const { a, b, lifted } of pairs) {
			if (!lifted) continue;
			const others = pairs.some(
				(pair) => pair.lifted !== lifted && pair.variants.length === 0 && meets(pair, a, b)
			);
			expect(findForbiddenPartner([a], b, [lifted]) === null).toBe(!others);
		}
	});

	test('all other pairs may meet', () => {
		for (const a of viewerRoles) {
			for (const b of viewerRoles) {
				const isNamed = pairs.some((pair) => pair.variants.length === 0 && meets(pair, a, b));
				expect(findForbiddenPartner([a], b) !== null).toBe(isNamed);
			}
		}
	});

	function meets(pair: { a: string; b: string }, one: string, other: string): boolean {
		return (pair.a === one && pair.b === other) || (pair.a === other && pair.b === one);
	}
});

test('approver and unblinded statistician are the roles that see arms', () => {
	expect(viewerRoles.filter(seesArms).toSorted()).toEqual(['approver', 'unblinded-statistician']);
});
