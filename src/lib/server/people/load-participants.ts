import { and, desc, eq, inArray } from 'drizzle-orm';
import type { WeeklyStretch } from '$lib/people/availability';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { consent, participant, person, type ParticipantState } from '$lib/server/db/schema';

/** What may be read of participants by those who enrol and book: no arm, no contact data. */
export type StudyParticipant = {
	id: string;
	code: string;
	number: number;
	protocolVersionId: string;
	state: ParticipantState;
	zone: string;
	language: string;
	availability: WeeklyStretch[];
	earliestStartAtMs: number | null;
	enrolledAtMs: number;
	consentedAtMs: number | null;
	baselinePassedAtMs: number | null;
	allocatedAtMs: number | null;
	completedAtMs: number | null;
	withdrawnAtMs: number | null;
	/** The consent signed last; null while there is none. */
	consent: { textVersion: string; signedAtMs: number } | null;
};

type PeopleGrant = Grant<
	| 'participant:list'
	| 'participant:withdraw'
	| 'booking:read'
	| 'booking:change'
	| 'message:read'
	| 'today:read'
	| 'visit:run'
>;

/** Everybody of the study by code, or one of them. */
export async function loadParticipants(
	db: Queryable,
	grant: PeopleGrant,
	only?: { participantId: string }
): Promise<StudyParticipant[]> {
	const rows = await db
		.select()
		.from(participant)
		.where(
			and(
				eq(participant.studyId, grant.studyId),
				only ? eq(participant.id, only.participantId) : undefined
			)
		)
		.orderBy(participant.number);
	const consents = await loadLastConsents(
		db,
		rows.map(({ id }) => id)
	);
	return rows.map((row) => shapeParticipant(row, consents.get(row.id) ?? null));
}

/** One participant of the grant's study; null when there is none with this id. */
export async function loadParticipant(
	db: Queryable,
	grant: PeopleGrant,
	participantId: string
): Promise<StudyParticipant | null> {
	if (!/^[0-9a-f-]{36}$/i.test(participantId)) return null;
	const [found] = await loadParticipants(db, grant, { participantId });
	return found ?? null;
}

function shapeParticipant(
	row: typeof participant.$inferSelect,
	lastConsent: StudyParticipant['consent']
): StudyParticipant {
	return {
		id: row.id,
		code: row.code,
		number: row.number,
		protocolVersionId: row.protocolVersionId,
		state: row.state,
		zone: row.zone,
		language: row.language,
		availability: row.availability,
		earliestStartAtMs: row.earliestStartAt?.getTime() ?? null,
		enrolledAtMs: row.enrolledAt.getTime(),
		consentedAtMs: row.consentedAt?.getTime() ?? null,
		baselinePassedAtMs: row.baselinePassedAt?.getTime() ?? null,
		allocatedAtMs: row.allocatedAt?.getTime() ?? null,
		completedAtMs: row.completedAt?.getTime() ?? null,
		withdrawnAtMs: row.withdrawnAt?.getTime() ?? null,
		consent: lastConsent
	};
}

async function loadLastConsents(db: Queryable, ids: readonly string[]) {
	const found = new Map<string, NonNullable<StudyParticipant['consent']>>();
	if (ids.length === 0) return found;
	const rows = await db
		.select()
		.from(consent)
		.where(inArray(consent.participantId, [...ids]))
		.orderBy(consent.signedAt, consent.recordedAt);
	for (const { participantId, textVersion, signedAt } of rows) {
		found.set(participantId, { textVersion, signedAtMs: signedAt.getTime() });
	}
	return found;
}

export type ConsentRecord = {
	textVersion: string;
	signedAtMs: number;
	recordedAtMs: number;
	recordedBy: string;
};

/** Every consent somebody signed, newest first, with who recorded it. */
export async function loadConsents(
	db: Queryable,
	grant: Grant<'participant:list'>,
	participantId: string
): Promise<ConsentRecord[]> {
	const rows = await db
		.select({
			textVersion: consent.textVersion,
			signedAt: consent.signedAt,
			recordedAt: consent.recordedAt,
			name: person.name,
			email: person.email
		})
		.from(consent)
		.innerJoin(participant, eq(participant.id, consent.participantId))
		.innerJoin(person, eq(person.id, consent.recordedBy))
		.where(and(eq(consent.participantId, participantId), eq(participant.studyId, grant.studyId)))
		.orderBy(desc(consent.signedAt), desc(consent.recordedAt));
	return rows.map((row) => ({
		textVersion: row.textVersion,
		signedAtMs: row.signedAt.getTime(),
		recordedAtMs: row.recordedAt.getTime(),
		recordedBy: row.name ?? row.email
	}));
}
