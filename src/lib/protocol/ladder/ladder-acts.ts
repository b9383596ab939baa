import { addArm, copyArm, moveArm, removeArm } from '../edit/arms';
import { dropOwnList, hasOwnList, mostBlocks, spreadList } from '../edit/block-lists';
import { duplicateBlocks, moveBlocks, readBlocks, removeBlocks } from '../edit/blocks';
import { addVisit, copyVisit, moveVisit, pasteVisit, removeVisit } from '../edit/visits';
import { plainBlock } from '../empty-parts';
import { visitName } from '../visit-name';
import type { Clip } from './clip';
import type { LadderState } from './ladder-state.svelte';
import { blocksAt, editedPlace, isBlockSpot, type Direction, type Spot } from './spots';

/** What can be done at the place where one stands: with blocks, with a visit, or with an arm. */

const few = (count: number): string => (count === 1 ? 'a block' : `${count} blocks`);

export function addNew(ladder: LadderState): void {
	const { spot, draft } = ladder;
	if (spot.arm < 0) return addVisitBehind(ladder);
	if (spot.visit < 0) return addArmBelow(ladder);
	const blocks = blocksAt(draft, spot);
	const like = blocks[spot.block];
	const kind = draft.visits[spot.visit]?.kind ?? 'practice';
	const block = like
		? plainBlock(like.purpose, like.trials)
		: plainBlock(kind === 'practice' ? 'adaptive' : kind, 60);
	const index = blocks.length === 0 ? 0 : spot.block + 1;
	ladder.insert({ ...ladder.place, index }, [block], 'adding a block');
}

export function addVisitBehind(ladder: LadderState): void {
	const { spot, draft } = ladder;
	const index = spot.visit < 0 ? draft.visits.length - 1 : spot.visit;
	ladder.act((now) => addVisit(now, index), 'adding a visit', {
		after: { ...spot, visit: index + 1, block: 0 },
		refused: 'A protocol has at most 40 visits.'
	});
}

export function addArmBelow(ladder: LadderState): void {
	const visit = ladder.spot.arm < 0 ? -1 : ladder.spot.visit;
	ladder.act(addArm, 'adding an arm', {
		after: { arm: ladder.draft.arms.length, visit, block: 0 },
		refused: 'A study has at most 6 arms.'
	});
}

export function duplicate(ladder: LadderState): void {
	const { spot, draft, refs } = ladder;
	if (spot.arm < 0) return copyDay(ladder);
	if (spot.visit < 0) {
		ladder.act((now) => copyArm(now, spot.arm), 'copying an arm', {
			after: { ...spot, arm: spot.arm + 1 },
			refused: 'A study has at most 6 arms.'
		});
		return;
	}
	const last = Math.max(...refs.map(({ block }) => block));
	const after = { ...spot, block: Math.min(blocksAt(draft, spot).length, last + 1) };
	ladder.act((now) => duplicateBlocks(now, refs), `copying ${few(refs.length)}`, {
		after,
		refused: `A visit has at most ${mostBlocks} blocks.`
	});
}

export function copyDay(ladder: LadderState): void {
	const { spot } = ladder;
	ladder.act((now) => copyVisit(now, spot.visit), 'copying a visit', {
		after: { ...spot, visit: spot.visit + 1 },
		refused: 'A protocol has at most 40 visits.'
	});
}

export function remove(ladder: LadderState): void {
	const { spot, refs } = ladder;
	if (spot.arm < 0) {
		const refused = 'The only visit stays.';
		ladder.act((now) => removeVisit(now, spot.visit), 'removing a visit', { refused });
	} else if (spot.visit < 0) {
		const refused = 'The only arm stays.';
		ladder.act((now) => removeArm(now, spot.arm), 'removing an arm', { refused });
	} else {
		const block = Math.min(...ladder.spots.map((one) => one.block), spot.block);
		const after = { ...spot, block };
		ladder.act((now) => removeBlocks(now, refs), `removing ${few(refs.length)}`, { after });
	}
}

/** Moves what is chosen one place that way: blocks, a visit sideways, an arm up or down. */
export function move(ladder: LadderState, direction: Direction): void {
	const { spot } = ladder;
	const by = ['up', 'left', 'armUp'].includes(direction) ? -1 : 1;
	const isSideways = direction === 'left' || direction === 'right';
	if (spot.arm < 0) {
		if (!isSideways) return;
		const after = { ...spot, visit: spot.visit + by };
		ladder.act((now) => moveVisit(now, spot.visit, by), 'moving a visit', { after });
	} else if (spot.visit < 0) {
		if (isSideways) return;
		const after = { ...spot, arm: spot.arm + by };
		ladder.act((now) => moveArm(now, spot.arm, by), 'moving an arm', { after });
	} else if (isSideways) putDown(ladder, { ...spot, visit: spot.visit + by });
	else if (direction === 'armUp' || direction === 'armDown') {
		putDown(ladder, { ...spot, arm: spot.arm + by });
	} else {
		const blocks = ladder.spots
			.filter(({ visit }) => visit === spot.visit)
			.map(({ block }) => block);
		const block = by < 0 ? Math.min(...blocks) - 1 : Math.max(...blocks) + 2;
		putDown(ladder, { ...spot, block });
	}
}

/** Puts what is chosen down before a place; `isCopy` leaves the pieces where they were, too. */
export function putDown(ladder: LadderState, to: Spot, isCopy = false): void {
	const { draft, refs, scope } = ladder;
	const list = blocksAt(draft, to);
	if (!isBlockSpot(to) || !draft.visits[to.visit] || !draft.arms[to.arm] || refs.length === 0)
		return;
	if (to.block < 0 || to.block > list.length + 1) return;
	const index = Math.min(to.block, list.length);
	const place = { ...editedPlace(draft, to, scope), index };
	const count = refs.length;
	const before = refs.filter(
		(ref) => ref.visit === place.visit && ref.arm === place.arm && ref.block < index
	).length;
	const first = isCopy ? index : index - before;
	if (isCopy) {
		ladder.spot = to;
		return ladder.insert(place, readBlocks(draft, refs), `copying ${few(count)}`);
	}
	const after = { ...to, block: first };
	const isDone = ladder.act((now) => moveBlocks(now, refs, place), `moving ${few(count)}`, {
		after,
		refused: `Nothing moved: it stands there already, or the visit has ${mostBlocks} blocks.`
	});
	if (isDone && count > 1) {
		ladder.chosen = refs.map((_, at) => ({ arm: to.arm, visit: to.visit, block: first + at }));
	}
}

export function takeCopy(ladder: LadderState): Clip | null {
	const { spot, draft, refs } = ladder;
	const visit = draft.visits[spot.visit];
	if (spot.arm < 0 && visit) {
		ladder.clip = { kind: 'visit', visit };
		ladder.say(`${visitName(visit, spot.visit)} is copied, with its gap and every arm’s blocks.`);
	} else if (isBlockSpot(spot) && refs.length > 0) {
		ladder.clip = { kind: 'blocks', blocks: readBlocks(draft, refs) };
		ladder.say(`${refs.length === 1 ? '1 block is' : `${refs.length} blocks are`} copied.`);
	} else return null;
	return ladder.clip;
}

export function paste(ladder: LadderState, clip: Clip | null = ladder.clip): void {
	const { spot, draft } = ladder;
	if (!clip) return ladder.say('Nothing has been copied yet.');
	if (clip.kind === 'visit') {
		const index = spot.visit < 0 ? draft.visits.length - 1 : spot.visit;
		ladder.act((now) => pasteVisit(now, clip.visit, index), 'pasting a visit', {
			after: { arm: -1, visit: index + 1, block: 0 },
			refused: 'A protocol has at most 40 visits.'
		});
		return;
	}
	if (!isBlockSpot(spot))
		return ladder.say('Stand at a block of an arm to paste blocks behind it.');
	const index = blocksAt(draft, spot).length === 0 ? 0 : spot.block + 1;
	ladder.insert({ ...ladder.place, index }, clip.blocks, `pasting ${few(clip.blocks.length)}`);
}

/** The arm runs the blocks of every arm again, here. */
export function shareAgain(ladder: LadderState): void {
	const { spot, draft } = ladder;
	const arm = draft.arms[spot.arm]?.key ?? null;
	if (!hasOwnList(draft.visits[spot.visit], arm)) {
		return ladder.say('These blocks are those of every arm already.');
	}
	ladder.act((now) => dropOwnList(now, { visit: spot.visit, arm }), 'the same for all arms again', {
		done: 'The same as every arm again.'
	});
}

/** Every arm runs the blocks of this arm, here. */
export function spread(ladder: LadderState): void {
	const { spot, draft } = ladder;
	const arm = draft.arms[spot.arm]?.key ?? null;
	ladder.act(
		(now) => spreadList(now, { visit: spot.visit, arm }),
		'giving every arm these blocks',
		{
			done: 'Every arm runs these blocks in this visit now.'
		}
	);
}
