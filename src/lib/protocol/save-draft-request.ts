import { z } from 'zod';
import { protocolDraftSchema, type ProtocolDraft } from './protocol-draft';

export const saveDraftBodySchema = z.object({
	number: z.number().int(),
	revision: z.number().int(),
	draft: protocolDraftSchema
});

export type SaveDraftBody = { number: number; revision: number; draft: ProtocolDraft };

/** What the server answers; the page can explain every reason. */
export const saveDraftReplySchema = z.discriminatedUnion('state', [
	z.object({
		state: z.literal('saved'),
		revision: z.number().int(),
		enteredBy: z.record(z.string(), z.string())
	}),
	z.object({
		state: z.literal('stale'),
		revision: z.number().int(),
		draft: protocolDraftSchema
	}),
	z.object({ state: z.literal('gone') }),
	z.object({ state: z.literal('refused'), faults: z.array(z.string()) })
]);

export type SaveDraftReply = z.infer<typeof saveDraftReplySchema>;

/** Sends the draft to be saved; null when no answer came, so that the caller tries again. */
export async function requestSave(
	address: string,
	body: SaveDraftBody,
	{ keepalive = false } = {}
): Promise<SaveDraftReply | null> {
	try {
		const response = await fetch(address, {
			method: 'PUT',
			headers: { 'content-type': 'application/json' },
			body: JSON.stringify(body),
			keepalive
		});
		const parsed = saveDraftReplySchema.safeParse(await response.json());
		return parsed.success ? parsed.data : null;
	} catch {
		return null;
	}
}
