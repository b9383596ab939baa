import { changeBlocks } from '../edit/blocks';
import { ladderCommands } from './ladder-commands';
import type { LadderState } from './ladder-state.svelte';
import { isBlockSpot, type Direction } from './spots';

const ways: Record<string, Direction> = {
	ArrowUp: 'up',
	ArrowDown: 'down',
	ArrowLeft: 'left',
	ArrowRight: 'right',
	Home: 'first',
	End: 'last',
	PageUp: 'armUp',
	PageDown: 'armDown'
};

const arrows: Record<string, string> = {
	ArrowUp: '↑',
	ArrowDown: '↓',
	ArrowLeft: '←',
	ArrowRight: '→',
	Backspace: 'Delete',
	Enter: 'E'
};

/** Digits that follow each other within this time are one number. */
const digitMs = 1200;

/** Keys of the ladder. Copy, cut and paste come as events of the browser's clipboard, not as keys. */
export function createLadderKeys(ladder: LadderState, help: () => void) {
	let typed = { digits: '', atMs: -Infinity };
	return (event: KeyboardEvent): void => {
		if (event.defaultPrevented) return;
		const isDone = walk(event) || goBack(event) || leave(event) || run(event) || type(event);
		if (isDone) event.preventDefault();
	};

	function walk(event: KeyboardEvent): boolean {
		const way = ways[event.key];
		if (!way || event.altKey || event.ctrlKey || event.metaKey) return false;
		if (event.shiftKey) ladder.stretch(way);
		else ladder.step(way);
		return true;
	}

	function goBack(event: KeyboardEvent): boolean {
		const keys = nameKeys(event);
		if (!['Ctrl+Z', 'Ctrl+Shift+Z', 'Ctrl+Y'].includes(keys)) return false;
		ladder.goBack(keys === 'Ctrl+Z' ? 'undo' : 'redo');
		return true;
	}

	function leave({ key }: KeyboardEvent): boolean {
		if (key === '?') help();
		else if (key !== 'Escape') return false;
		else if (ladder.isEditing) ladder.endEdit();
		else ladder.stand(ladder.spot);
		return true;
	}

	function run(event: KeyboardEvent): boolean {
		const keys = nameKeys(event);
		if (['Ctrl+C', 'Ctrl+X', 'Ctrl+V'].includes(keys)) return false;
		const command = ladderCommands.find((one) => one.keys === keys);
		if (!command || command.fits?.(ladder) === false) return false;
		command.run(ladder);
		return true;
	}

	/** Digits write the trials of what is chosen. */
	function type(event: KeyboardEvent): boolean {
		const isPlain = !event.ctrlKey && !event.metaKey && !event.altKey;
		if (!isPlain || !/^\d$/.test(event.key) || !isBlockSpot(ladder.spot)) return false;
		const isNext = event.timeStamp - typed.atMs < digitMs;
		const digits = `${isNext ? typed.digits : ''}${event.key}`.slice(-4);
		typed = { digits, atMs: event.timeStamp };
		const { refs, chosen } = ladder;
		ladder.act((draft) => changeBlocks(draft, refs, { trials: Number(digits) }), 'typing trials', {
			done: `${digits} trials`
		});
		ladder.chosen = chosen;
		return true;
	}
}

/** 'Alt+↑', 'Shift+D', 'Ctrl+A', 'E'. */
function nameKeys({ key, ctrlKey, metaKey, altKey, shiftKey }: KeyboardEvent): string {
	const name = arrows[key] ?? (key.length === 1 ? key.toUpperCase() : key);
	const isShifted = shiftKey && /^[A-Z]$/.test(name);
	return [
		...(ctrlKey || metaKey ? ['Ctrl'] : []),
		...(altKey ? ['Alt'] : []),
		...(isShifted ? ['Shift'] : []),
		name
	].join('+');
}
