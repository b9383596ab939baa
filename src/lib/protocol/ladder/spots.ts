import { hasOwnList, readList, type BlockRef, type ListPlace } from '../edit/block-lists';
import type { ProtocolDraft } from '../protocol-draft';

/**
 * Where one stands in the ladder, by index. `arm` -1: the head of a visit; `visit` -1: the head of an
 * arm. An empty list has one place to stand, block 0.
 */
export type Spot = { arm: number; visit: number; block: number };

type Part = Pick<ProtocolDraft, 'arms' | 'visits'>;

export const isBlockSpot = ({ arm, visit }: Spot): boolean => arm >= 0 && visit >= 0;
export const spotKey = ({ arm, visit, block }: Spot): string => `${arm}:${visit}:${block}`;
export const isSameSpot = (a: Spot, b: Spot): boolean => spotKey(a) === spotKey(b);

/** Whose edits count: of the one arm that is pointed at, or of every arm that has no list of its own. */
export type Scope = 'arm' | 'every';

/** The list that an edit at a spot changes. */
export function editedPlace(draft: Part, { arm, visit }: Spot, scope: Scope): ListPlace {
	const key = draft.arms[arm]?.key ?? null;
	const isOwn = hasOwnList(draft.visits[visit], key);
	return { visit, arm: isOwn || (scope === 'arm' && draft.arms.length > 1) ? key : null };
}

/** The blocks that stand at a spot's arm and visit. */
export function blocksAt(draft: Part, { arm, visit }: Spot) {
	return readList(draft, { visit, arm: draft.arms[arm]?.key ?? null });
}

/** The nearest spot that exists. */
export function clampSpot(draft: Part, spot: Spot): Spot {
	const arm = Math.min(spot.arm, draft.arms.length - 1);
	const visit = Math.min(spot.visit, draft.visits.length - 1);
	if (arm < 0 || visit < 0) return { arm: visit < 0 ? Math.max(0, arm) : -1, visit, block: 0 };
	const last = blocksAt(draft, { arm, visit, block: 0 }).length - 1;
	return { arm, visit, block: Math.max(0, Math.min(spot.block, last)) };
}

export type Direction = 'up' | 'down' | 'left' | 'right' | 'first' | 'last' | 'armUp' | 'armDown';

/** The next spot that way; the same one at the edge. */
export function stepSpot(draft: Part, spot: Spot, direction: Direction): Spot {
	const { arm, visit, block } = spot;
	const to = (next: Partial<Spot>) => clampSpot(draft, { ...spot, ...next });
	if (direction === 'left') return to({ visit: Math.max(arm < 0 ? 0 : -1, visit - 1) });
	if (direction === 'right') return to({ visit: visit + 1 });
	if (direction === 'first') return to({ visit: 0 });
	if (direction === 'last') return to({ visit: draft.visits.length - 1 });
	if (direction === 'armDown') return to({ arm: arm + 1 });
	if (direction === 'armUp') return to({ arm: Math.max(visit < 0 ? 0 : -1, arm - 1) });
	if (!isBlockSpot(spot)) return stepHead(draft, spot, direction);
	const count = blocksAt(draft, spot).length;
	if (direction === 'down') {
		if (block < count - 1) return to({ block: block + 1 });
		return arm < draft.arms.length - 1 ? to({ arm: arm + 1, block: 0 }) : spot;
	}
	if (block > 0) return to({ block: block - 1 });
	return arm === 0 ? { arm: -1, visit, block: 0 } : to({ arm: arm - 1, block: Infinity });
}

function stepHead(draft: Part, { arm, visit }: Spot, direction: 'up' | 'down'): Spot {
	const by = direction === 'down' ? 1 : -1;
	if (visit < 0) return clampSpot(draft, { arm: Math.max(0, arm + by), visit, block: 0 });
	return { arm: direction === 'down' ? 0 : -1, visit, block: 0 };
}

/** Every block from one spot to another of the same arm, in reading order. */
export function spotsBetween(draft: Part, from: Spot, to: Spot): Spot[] {
	if (!isBlockSpot(from) || from.arm !== to.arm || to.visit < 0) return [to];
	const order = (spot: Spot) => spot.visit * 1000 + spot.block;
	const [first, last] = order(from) <= order(to) ? [from, to] : [to, from];
	const found: Spot[] = [];
	for (let visit = first.visit; visit <= last.visit; visit += 1) {
		blocksAt(draft, { ...first, visit }).forEach((_, block) => {
			const spot = { arm: first.arm, visit, block };
			if (order(spot) >= order(first) && order(spot) <= order(last)) found.push(spot);
		});
	}
	return found;
}

export function refsOf(draft: Part, spots: readonly Spot[], scope: Scope): BlockRef[] {
	return spots
		.filter((spot) => isBlockSpot(spot) && blocksAt(draft, spot)[spot.block] !== undefined)
		.map((spot) => ({ ...editedPlace(draft, spot, scope), block: spot.block }));
}
