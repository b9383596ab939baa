import { clipType, readClip, writeClip } from './clip';
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
			event.clipboardData?.setData('text/plain', writeClip(clip));
			if (event.type === 'cut') remove(ladder);
		},
		paste(event: ClipboardEvent): void {
			event.preventDefault();
			const read = (type: string) => readClip(event.clipboardData?.getData(type) ?? '');
			paste(ladder, read(clipType) ?? read('text/plain') ?? ladder.clip);
		}
	};
}
