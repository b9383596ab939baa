import { and, eq, inArray } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { consent, lab, participant } from '$lib/server/db/schema';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { startOfLocalDate } from '$lib/time/start-of-local-day';
import { localDateOf } from '$lib/time/wall-clock';

export type ConsentInput = {
	participantIds: readonly string[];
	/** Which version of the text was signed. */
	textVersion: string;
	/** Local date of the signature in the lab's zone, 'YYYY-MM-DD'. */
	signedOn: string;
};
export type ConsentOutcome =
	| { ok: true; codes: string[] }
	| { ok: false; reason: 'in-the-future' | 'withdrawn' | 'not-found'; code?: string };

/**
 * Records that people signed a version of the consent text, when, and who saw it. Rows are only ever
 * added: a newer text is a further row.
 */
export async function recordConsent(
	db: Database,
	clock: Clock,
	grant: Grant<'consent:record'>,
	input: ConsentInput
): Promise<ConsentOutcome> {
	return db.transaction(async (tx) => {
		const zone = await loadZone(tx, grant.labId);
		if (input.signedOn > localDateOf(clock.now(), zone))
			return { ok: false, reason: 'in-the-future' };
		const people = await lockPeople(tx, grant, input.participantIds);
		if (people.length !== new Set(input.participantIds).size)
			return { ok: false, reason: 'not-found' };
		const gone = people.find((person) => person.withdrawnAt !== null);
		if (gone) return { ok: false, reason: 'withdrawn', code: gone.code };
		const signedAt = new Date(
			Math.min(startOfLocalDate(input.signedOn, zone) + noonMs, clock.now())
		);
		for (const person of people)
			await storeConsent(tx, clock, grant, { ...input, person, signedAt });
		return { ok: true, codes: people.map(({ code }) => code) };
	});
}

/** A signature has a day, not an hour: it is kept as that day's noon. */
const noonMs = 12 * 3_600_000;

async function loadZone(tx: Queryable, labId: string): Promise<string> {
	const [row] = await tx.select({ zone: lab.zone }).from(lab).where(eq(lab.id, labId));
	return row?.zone ?? 'UTC';
}

type PersonRow = typeof participant.$inferSelect;

async function lockPeople(
	tx: Queryable,
	grant: Grant<'consent:record'>,
	ids: readonly string[]
): Promise<PersonRow[]> {
	if (ids.length === 0) return [];
	return tx
		.select()
		.from(participant)
		.where(and(eq(participant.studyId, grant.studyId), inArray(participant.id, [...ids])))
		.orderBy(participant.number)
		.for('update');
}

async function storeConsent(
	tx: Queryable,
	clock: Clock,
	grant: Grant<'consent:record'>,
	{ person, textVersion, signedAt }: { person: PersonRow; textVersion: string; signedAt: Date }
): Promise<void> {
	await tx.insert(consent).values({
		participantId: person.id,
		textVersion,
		signedAt,
		recordedBy: grant.personId,
		recordedAt: new Date(clock.now())
	});
	const isFirst = person.consentedAt === null;
	const state = person.state === 'lead' || person.state === 'screened' ? 'consented' : person.state;
	await tx
		.update(participant)
		.set({ state, ...(isFirst ? { consentedAt: signedAt } : {}) })
		.where(eq(participant.id, person.id));
	await recordEvent(tx, clock, actorOf(grant), {
		kind: 'consent-recorded',
		item: 'consent-record',
		labId: grant.labId,
		studyId: grant.studyId,
		participantId: person.id,
		body: { textVersion, signedAt: signedAt.toISOString() }
	});
}
