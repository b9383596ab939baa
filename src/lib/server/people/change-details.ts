import { and, eq, ne } from 'drizzle-orm';
import { checkCells } from '$lib/people/check-cells';
import type { CellFault, EnrolmentCells } from '$lib/people/enrolment-columns';
import { makeFault } from '$lib/people/check-cells';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { contact, participant } from '$lib/server/db/schema';
import { renewFailedMail } from '$lib/server/invitations/enqueue-visit-change';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { findEnrolled } from './find-enrolled';
import { loadCellDefaults } from './check-rows';

export type DetailsOutcome =
	| { ok: true }
	| { ok: false; reason: 'faults'; faults: CellFault[] }
	| { ok: false; reason: 'not-found' };

type DetailsInput = {
	keys: PeopleKeys;
	mail: MailSetting;
	participantId: string;
	cells: EnrolmentCells;
};

/**
 * Mends a person's contact data, language, zone and hours. Bookings stay where they are; one that
 * the new hours rule out becomes a task of the coordinator. Mail that could not be delivered is
 * written anew.
 */
export async function changeDetails(
	db: Database,
	clock: Clock,
	grant: Grant<'participant:enrol'>,
	{ keys, mail, participantId, cells }: DetailsInput
): Promise<DetailsOutcome> {
	const answer = checkCells(cells, await loadCellDefaults(db, grant));
	if (!answer.ok) return { ok: false, reason: 'faults', faults: answer.faults };
	const { name, email, phone, language, zone, availability } = answer.person;
	const emailIndex = keys.indexEmail(email);
	return db.transaction(async (tx) => {
		const found = await lockPerson(tx, grant, participantId);
		if (!found) return { ok: false, reason: 'not-found' };
		const twin = await findTwinCode(tx, { studyId: grant.studyId, participantId, emailIndex });
		if (twin) {
			const fault = makeFault('email', cells, `is enrolled already, as ${twin}`);
			return { ok: false, reason: 'faults', faults: [fault] };
		}
		const sealed = await keys.folder.encrypt(participantId, JSON.stringify({ name, email, phone }));
		const updatedAt = new Date(clock.now());
		const index = new Uint8Array(Buffer.from(emailIndex, 'hex'));
		await tx
			.update(contact)
			.set({ sealed, emailIndex: index, updatedAt })
			.where(eq(contact.participantId, participantId));
		await tx
			.update(participant)
			.set({ language, zone, availability })
			.where(eq(participant.id, participantId));
		await renewFailedMail(tx, clock, mail, participantId);
		await recordEvent(tx, clock, actorOf(grant), {
			kind: 'contact-changed',
			item: 'contact',
			labId: grant.labId,
			studyId: grant.studyId,
			participantId
		});
		return { ok: true };
	});
}

async function lockPerson(tx: Queryable, grant: Grant, participantId: string): Promise<boolean> {
	const rows = await tx
		.select({ id: participant.id })
		.from(participant)
		.where(and(eq(participant.id, participantId), eq(participant.studyId, grant.studyId)))
		.for('update');
	return rows.length > 0;
}

async function findTwinCode(
	tx: Queryable,
	{
		studyId,
		participantId,
		emailIndex
	}: { studyId: string; participantId: string; emailIndex: string }
): Promise<string | null> {
	const code = (await findEnrolled(tx, studyId, [emailIndex])).get(emailIndex);
	if (!code) return null;
	const [other] = await tx
		.select({ code: participant.code })
		.from(participant)
		.where(
			and(
				eq(participant.studyId, studyId),
				eq(participant.code, code),
				ne(participant.id, participantId)
			)
		);
	return other?.code ?? null;
}
