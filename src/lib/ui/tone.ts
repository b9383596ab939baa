/** What a note, a line or a word is about; always said in words as well. */
export type Tone = 'plain' | 'spruce' | 'iris' | 'amber' | 'rose';

export const toneText: Record<Tone, string> = {
	plain: 'text-muted',
	spruce: 'text-spruce',
	iris: 'text-iris',
	amber: 'text-amber',
	rose: 'text-rose'
};
