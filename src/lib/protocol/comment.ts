import { z } from 'zod';

const body = z
	.string()
	.trim()
	.min(2, 'Write what you want to say')
	.max(4000, 'Longer than 4000 characters');

/** A comment's place: 'visits/visit-3' is a line, 'visits' a whole part. */
export const commentSchema = z.object({
	version: z.coerce.number().int().positive(),
	anchor: z.string().regex(/^[a-z-]{1,60}(\/.{1,200})?$/, 'Choose what the comment is about'),
	body
});

export const answerSchema = z.object({ commentId: z.uuid(), body });
export const resolveSchema = z.object({
	commentId: z.uuid(),
	resolved: z.enum(['yes', 'no'])
});

/** The part and line of an anchor; no line for a whole part. */
export function splitAnchor(anchor: string): { partKey: string; lineKey: string | null } {
	const cut = anchor.indexOf('/');
	if (cut < 0) return { partKey: anchor, lineKey: null };
	return { partKey: anchor.slice(0, cut), lineKey: anchor.slice(cut + 1) };
}

export const joinAnchor = (partKey: string, lineKey: string | null) =>
	lineKey === null ? partKey : `${partKey}/${lineKey}`;
