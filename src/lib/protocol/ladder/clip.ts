import { z } from 'zod';
import { blockDraftSchema, visitDraftSchema } from '../draft-parts';

/** What was copied in a ladder; it can be pasted into another draft or another study. */
const clipSchema = z.discriminatedUnion('kind', [
	z.object({ kind: z.literal('blocks'), blocks: z.array(blockDraftSchema).min(1).max(400) }),
	z.object({ kind: z.literal('visit'), visit: visitDraftSchema })
]);

export type Clip = z.infer<typeof clipSchema>;

/** The name under which the browser's clipboard carries it beside plain text. */
export const clipType = 'application/x-ovalry-ladder';

export const writeClip = (clip: Clip): string => JSON.stringify(clip);

/** Null for what did not come from a ladder. */
export function readClip(text: string): Clip | null {
	if (text === '') return null;
	try {
		const parsed = clipSchema.safeParse(JSON.parse(text));
		return parsed.success ? parsed.data : null;
	} catch {
		return null;
	}
}
