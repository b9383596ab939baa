import { eq } from 'drizzle-orm';
import { z } from 'zod';
import type { Queryable } from '$lib/server/db/client';
import { contact, lab, participant, study } from '$lib/server/db/schema';
import type { MailSetting } from './mail-setting';

const contactSchema = z.object({ name: z.string(), email: z.string() });

/** A participant as somebody to write to, with the laboratory that writes. */
export interface Recipient {
	participantId: string;
	studyId: string;
	language: string;
	zone: string;
	name: string;
	email: string;
	publicTitle: string;
	lab: { name: string; zone: string; address: string; phone: string; email: string };
}

export type FoundRecipient = { ok: true; recipient: Recipient } | { ok: false; reason: 'erased' };

/** @throws RangeError when there is no such participant, or no contact data of theirs. */
export async function loadRecipient(
	db: Queryable,
	setting: MailSetting,
	participantId: string
): Promise<FoundRecipient> {
	const [row] = await db
		.select({ participant, study, lab, sealed: contact.sealed })
		.from(participant)
		.innerJoin(study, eq(study.id, participant.studyId))
		.innerJoin(lab, eq(lab.id, study.labId))
		.innerJoin(contact, eq(contact.participantId, participant.id))
		.where(eq(participant.id, participantId));
	if (!row) throw new RangeError('Nobody with contact data has this id');
	const opened = await setting.keys.readText(participantId, row.sealed);
	if (!opened.ok) return opened;
	const { name, email } = contactSchema.parse(JSON.parse(opened.text));
	return {
		ok: true,
		recipient: {
			participantId,
			studyId: row.study.id,
			language: row.participant.language,
			zone: row.participant.zone,
			name,
			email,
			publicTitle: row.study.publicTitle,
			lab: {
				name: row.lab.name,
				zone: row.lab.zone,
				address: row.lab.address,
				phone: row.study.phone || row.lab.phone,
				email: setting.fromAddress
			}
		}
	};
}
