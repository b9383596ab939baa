import { z } from 'zod';
import type { KeyFolder } from '$lib/server/keys/person-keys';

/** What a mail tells about a visit; compared to see whether there is anything new to tell. */
export const toldVisitSchema = z.object({
	startMs: z.number(),
	endMs: z.number(),
	place: z.string()
});
export type ToldVisit = z.infer<typeof toldVisitSchema>;

const sealedMailSchema = z.object({
	envelope: z.object({ from: z.string(), to: z.string() }),
	/** The message's bytes in base64. */
	mime: z.string(),
	told: toldVisitSchema.nullable()
});

export interface StoredMail {
	envelope: { from: string; to: string };
	mime: Uint8Array;
	told: ToldVisit | null;
}

/** A finished mail under the participant's key, as the outbox keeps it. */
export async function sealMail(
	keys: KeyFolder,
	participantId: string,
	mail: StoredMail
): Promise<Uint8Array> {
	const mime = Buffer.from(mail.mime).toString('base64');
	return keys.encrypt(participantId, JSON.stringify({ ...mail, mime }));
}

export async function openMail(
	keys: KeyFolder,
	participantId: string,
	sealed: Uint8Array
): Promise<{ ok: true; mail: StoredMail } | { ok: false; reason: 'erased' }> {
	const opened = await keys.readText(participantId, sealed);
	if (!opened.ok) return opened;
	const { mime, ...rest } = sealedMailSchema.parse(JSON.parse(opened.text));
	return { ok: true, mail: { ...rest, mime: new Uint8Array(Buffer.from(mime, 'base64')) } };
}
