import { clipType, readClip, writeClip } from './clip';
import { writeBlocks } from '../table/write-block-rows';
import { paste, remove, takeCopy } from './ladder-acts';
import type { LadderState } from './ladder-state.svelte';

/** Copy, cut and paste of the browser: between visits, drafts and studies. */
export function createLadderClipboard(ladder: LadderState) {
	return {
		copy(event: ClipboardEvent): void {
			const clip = takeCopy(ladder);
			if (!clip) return;
			event.preventDefault();
			event.clipboardData?.setData(clipType, writeClip(clip));
			const { draft, refs } = ladder;
			event.clipboardData?.setData('text/plain', refs.length > 0 ? writeBlocks(draft, refs) : '');
			if (event.type === 'cut') remove(ladder);
		},
		paste(event: ClipboardEvent): void {
			event.preventDefault();
			const clip = readClip(event.clipboardData?.getData(clipType) ?? '');
			const text = event.clipboardData?.getData('text/plain') ?? '';
			if (!clip && /[\t\n]/.test(text.trim())) ladder.pasted = text;
			else paste(ladder, clip ?? ladder.clip);
		}
	};
}
