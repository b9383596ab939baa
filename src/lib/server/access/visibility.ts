import { z } from 'zod';
import table from './visibility.json' with { type: 'json' };

export type Level = keyof typeof table.levels;
export type ViewerRole = keyof typeof table.roles;
export type Item = keyof typeof table.items;
export type Variant = keyof typeof table.variants;

const cellSchema = z.union([z.string(), z.array(z.string())]);

/** Every role, item and level of the table, for select lists, tests and texts. */
export const viewerRoles = Object.keys(table.roles) as ViewerRole[];
export const items = Object.keys(table.items) as Item[];
export const levels = Object.keys(table.levels) as Level[];

/**
 * What a person with these roles may see of an item: the union of their roles' cells, after the
 * variants that the frozen protocol declares. `none` is dropped as soon as there is anything else.
 */
export function findLevels(
	roles: readonly ViewerRole[],
	item: Item,
	variants: readonly string[] = []
): Set<Level> {
	const found = new Set<Level>();
	for (const role of roles) for (const level of readCell(role, item, variants)) found.add(level);
	if (found.size > 1) found.delete('none');
	return found.size === 0 ? new Set<Level>(['none']) : found;
}

function readCell(role: ViewerRole, item: Item, variants: readonly string[]): Level[] {
	let cell: unknown = table.items[item][role];
	for (const variant of variants) {
		const changes = (table.variants as Record<string, { changes?: Record<string, unknown> }>)[
			variant
		]?.changes;
		const change = (changes?.[role] as Record<string, unknown> | undefined)?.[item];
		if (change !== undefined) cell = change;
	}
	const parsed = cellSchema.parse(cell);
	return (Array.isArray(parsed) ? parsed : [parsed]) as Level[];
}

type ForbiddenPair = { a: string; b: string[]; unless?: string; when?: string };

/**
 * The role, held now or earlier, that the new one must not join in one study; null when none.
 */
export function findForbiddenPartner(
	held: readonly ViewerRole[],
	added: ViewerRole,
	variants: readonly string[] = []
): ViewerRole | null {
	const pairs = table['never-in-one-study-now-or-earlier'] as ForbiddenPair[];
	for (const pair of pairs) {
		if (pair.unless && variants.includes(pair.unless)) continue;
		if (pair.when && !variants.includes(pair.when)) continue;
		for (const other of held) {
			if (joins(pair, added, other) || joins(pair, other, added)) return other;
		}
	}
	return null;
}

function joins(pair: ForbiddenPair, first: ViewerRole, second: ViewerRole): boolean {
	return first === pair.a && first !== second && (pair.b.includes('*') || pair.b.includes(second));
}

/** Whether a role sees arms by default: such a role is given by two people. */
export function seesArms(role: ViewerRole): boolean {
	return findLevels([role], 'arm').has('yes');
}
