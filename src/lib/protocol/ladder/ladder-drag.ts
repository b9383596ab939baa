import { putDown } from './ladder-acts';
import type { LadderState } from './ladder-state.svelte';
import { isSameSpot, type Spot } from './spots';

/** So far a press is no drag. */
const slackPx = 5;

/**
 * Picks pieces up by pointer. A press chooses (Shift: up to here, Ctrl: one more), a drag moves what is
 * chosen, and with Ctrl or Alt copies it; Esc puts it back. A finger scrolls: it chooses, and moves by
 * the buttons.
 */
export function createLadderDrag(ladder: LadderState) {
	return (event: PointerEvent, spot: Spot): void => {
		if (event.button !== 0) return;
		choose(event, spot);
		if (event.pointerType === 'touch') return;
		const start = { x: event.clientX, y: event.clientY };
		const stop = new AbortController();
		const { signal } = stop;
		const end = () => {
			stop.abort();
			ladder.drop = null;
			ladder.held = null;
		};
		const follow = (now: PointerEvent) => {
			const far = Math.hypot(now.clientX - start.x, now.clientY - start.y);
			if (!ladder.held && far < slackPx) return;
			ladder.held = { x: now.clientX, y: now.clientY };
			ladder.drop = findDrop(now);
		};
		const release = (now: PointerEvent) => {
			const { drop } = ladder;
			end();
			if (drop) putDown(ladder, drop, now.ctrlKey || now.metaKey || now.altKey);
		};
		const cancel = (now: KeyboardEvent) => {
			if (now.key !== 'Escape') return;
			now.stopPropagation();
			end();
		};
		window.addEventListener('pointermove', follow, { signal });
		window.addEventListener('pointerup', release, { signal });
		window.addEventListener('pointercancel', end, { signal });
		window.addEventListener('keydown', cancel, { signal, capture: true });
	};

	function choose(event: PointerEvent, spot: Spot): void {
		if (event.shiftKey) ladder.stretchTo(spot);
		else if (event.ctrlKey || event.metaKey) ladder.toggle(spot);
		else if (!ladder.chosen.some((one) => isSameSpot(one, spot))) ladder.stand(spot);
		else ladder.spot = spot;
	}
}

/** The place between two pieces below the pointer; null outside every cell. */
function findDrop({ clientX, clientY }: PointerEvent): Spot | null {
	const cell = document.elementFromPoint(clientX, clientY)?.closest<HTMLElement>('[data-cell]');
	const [arm, visit] = (cell?.dataset.cell ?? '').split(':').map(Number);
	if (!cell || arm === undefined || visit === undefined) return null;
	const pieces = [...cell.querySelectorAll('[data-spot]')];
	const above = pieces.filter((piece) => {
		const { top, height } = piece.getBoundingClientRect();
		return clientY > top + height / 2;
	});
	return { arm, visit, block: above.length };
}
