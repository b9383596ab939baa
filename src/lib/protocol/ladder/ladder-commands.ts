import {
	addArmBelow,
	addNew,
	addVisitBehind,
	copyDay,
	duplicate,
	move,
	paste,
	remove,
	shareAgain,
	spread,
	takeCopy
} from './ladder-acts';
import type { LadderState } from './ladder-state.svelte';
import { isBlockSpot, type Direction } from './spots';

/** Something that can be done in the ladder: a key, a button, a line of the palette. */
export type LadderCommand = {
	id: string;
	/** What it does, as a button says it. */
	label: string;
	/** As written on the keys; empty without one. */
	keys: string;
	run: (ladder: LadderState) => void;
	/** Left out where it makes no sense. */
	fits?: (ladder: LadderState) => boolean;
};

const onBlock = ({ spot }: LadderState) => isBlockSpot(spot);
const hasArms = ({ draft, spot }: LadderState) => isBlockSpot(spot) && draft.arms.length > 1;
const onVisit = ({ spot }: LadderState) => spot.visit >= 0;

export const ladderCommands: readonly LadderCommand[] = [
	{ id: 'edit', label: 'Edit', keys: 'E', run: (ladder) => ladder.edit() },
	{ id: 'new', label: 'New block', keys: 'N', run: addNew, fits: onBlock },
	{ id: 'duplicate', label: 'Duplicate', keys: 'D', run: duplicate },
	{ id: 'copy', label: 'Copy', keys: 'Ctrl+C', run: takeCopy },
	{ id: 'cut', label: 'Cut', keys: 'Ctrl+X', run: cut, fits: onBlock },
	{ id: 'paste', label: 'Paste', keys: 'Ctrl+V', run: (ladder) => paste(ladder) },
	{ id: 'remove', label: 'Remove', keys: 'Delete', run: remove },
	{ id: 'earlier', label: 'Move up', keys: 'Alt+↑', run: mover('up') },
	{ id: 'later', label: 'Move down', keys: 'Alt+↓', run: mover('down') },
	{
		id: 'left',
		label: 'Move to the visit before',
		keys: 'Alt+←',
		run: mover('left'),
		fits: onVisit
	},
	{
		id: 'right',
		label: 'Move to the next visit',
		keys: 'Alt+→',
		run: mover('right'),
		fits: onVisit
	},
	{
		...{ id: 'arm-up', label: 'Move to the arm above', keys: 'Alt+PageUp' },
		...{ run: mover('armUp'), fits: hasArms }
	},
	{
		...{ id: 'arm-down', label: 'Move to the arm below', keys: 'Alt+PageDown' },
		...{ run: mover('armDown'), fits: hasArms }
	},
	{
		id: 'all',
		label: 'Choose every block of the visit',
		keys: 'Ctrl+A',
		run: choose,
		fits: onBlock
	},
	{ id: 'copy-day', label: 'Copy the day', keys: 'Shift+D', run: copyDay, fits: onVisit },
	{ id: 'new-visit', label: 'New visit', keys: 'Shift+N', run: addVisitBehind },
	{ id: 'new-arm', label: 'New arm', keys: 'Shift+A', run: addArmBelow },
	{ id: 'table', label: 'Show as table', keys: 'T', run: (ladder) => (ladder.isTable = true) },
	{
		...{ id: 'rows', label: 'Paste rows of a spreadsheet', keys: '' },
		run: (ladder) => (ladder.pasted = '')
	},
	{ id: 'scope', label: 'Edit one arm or every arm', keys: 'A', run: turnScope },
	{ id: 'share', label: 'Same for all arms again', keys: '=', run: shareAgain, fits: hasArms },
	{
		id: 'spread',
		label: 'Give every arm these blocks',
		keys: 'Shift+E',
		run: spread,
		fits: hasArms
	}
];

function mover(direction: Direction) {
	return (ladder: LadderState) => move(ladder, direction);
}

export function cut(ladder: LadderState): void {
	if (takeCopy(ladder)) remove(ladder);
}

function choose(ladder: LadderState): void {
	ladder.chooseVisit();
}

function turnScope(ladder: LadderState): void {
	ladder.scope = ladder.scope === 'arm' ? 'every' : 'arm';
	ladder.say(
		ladder.scope === 'arm'
			? 'Edits change the one arm that is pointed at.'
			: 'Edits change every arm without blocks of its own.'
	);
}
