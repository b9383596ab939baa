import { eq, sql } from 'drizzle-orm';
import { randomUUID } from 'node:crypto';
import type { CheckedRow } from '$lib/people/enrolment-columns';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { contact, participant, study } from '$lib/server/db/schema';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import {
	findMissingGates,
	loadRunningVersion,
	type MissingGate
} from '$lib/server/studies/load-gates';
import { checkRows, type ReadRow, type RowToCheck } from './check-rows';
import { findTakenCodes } from './find-taken-codes';

export type EnrolOutcome =
	| { ok: true; codes: string[]; stayed: CheckedRow[] }
	| { ok: false; reason: 'gates-missing'; gates: MissingGate[] };

/**
 * Enrols every row that has no fault, each with the next code of the study; rows with faults come
 * back as they were. Who a person is goes into `contact`, under a key of their own.
 */
export async function enrolPeople(
	db: Database,
	clock: Clock,
	grant: Grant<'participant:enrol'>,
	{ keys, rows }: { keys: PeopleKeys; rows: readonly RowToCheck[] }
): Promise<EnrolOutcome> {
	return db.transaction(async (tx) => {
		const gates = await findMissingGates(tx, clock, grant.studyId);
		const version = await loadRunningVersion(tx, clock, grant.studyId);
		if (gates.length > 0 || !version) return { ok: false, reason: 'gates-missing', gates };
		const { prefix, lastNumber } = await lockCodes(tx, grant.studyId);
		const checked = await checkRows(tx, grant, { keys, rows });
		const stayed = checked.filter(({ person }) => !person).map(withoutPerson);
		const taken = await findTakenCodes(tx, grant.studyId);
		const codes: string[] = [];
		let number = lastNumber;
		for (const { person } of checked) {
			if (!person) continue;
			do number += 1;
			while (person.code === '' && taken.has(formatCode(prefix, number)));
			const code = person.code || formatCode(prefix, number);
			taken.add(code);
			await storePerson(tx, { clock, keys, grant, person, number, code, versionId: version.id });
			codes.push(code);
		}
		if (codes.length > 0) await recordEnrolment(tx, clock, grant, codes);
		return { ok: true, codes, stayed };
	});
}

/** The code of a participant: the study's letters and a number, such as TW-017. */
export function formatCode(prefix: string, number: number): string {
	return `${prefix}-${String(number).padStart(3, '0')}`;
}

/** The codes that the next rows would get; others may take them before these are added. */
export async function foretellCodes(
	db: Queryable,
	grant: Grant<'participant:enrol'>,
	count: number
): Promise<{ first: string; last: string } | null> {
	if (count === 0) return null;
	const { prefix, lastNumber } = await readCodes(db, grant.studyId);
	return {
		first: formatCode(prefix, lastNumber + 1),
		last: formatCode(prefix, lastNumber + count)
	};
}

/** Holds the study's row, so that two enrolments at once give different codes. */
async function lockCodes(tx: Queryable, studyId: string) {
	await tx.select({ id: study.id }).from(study).where(eq(study.id, studyId)).for('update');
	return readCodes(tx, studyId);
}

async function readCodes(db: Queryable, studyId: string) {
	const [row] = await db
		.select({
			prefix: study.codePrefix,
			lastNumber: sql<number>`coalesce(max(${participant.number}), 0)::int`
		})
		.from(study)
		.leftJoin(participant, eq(participant.studyId, study.id))
		.where(eq(study.id, studyId))
		.groupBy(study.codePrefix);
	if (!row) throw new RangeError('enrolment requires a study that exists');
	return row;
}

type NewPerson = {
	clock: Clock;
	keys: PeopleKeys;
	grant: Grant<'participant:enrol'>;
	person: NonNullable<ReadRow['person']>;
	number: number;
	code: string;
	versionId: string;
};

/** A key without a row (when the transaction fails later) opens nothing and harms nobody. */
async function storePerson(tx: Queryable, input: NewPerson): Promise<void> {
	const { clock, keys, grant, person, number, code, versionId } = input;
	const id = randomUUID();
	const now = new Date(clock.now());
	const { name, email, phone, language, zone, availability, emailIndex } = person;
	await keys.folder.createKey(id);
	const sealed = await keys.folder.encrypt(id, JSON.stringify({ name, email, phone }));
	await tx.insert(participant).values({
		id,
		studyId: grant.studyId,
		protocolVersionId: versionId,
		number,
		code,
		state: 'lead',
		zone,
		language,
		availability,
		enrolledAt: now
	});
	const index = new Uint8Array(Buffer.from(emailIndex, 'hex'));
	await tx.insert(contact).values({
		participantId: id,
		studyId: grant.studyId,
		sealed,
		emailIndex: index,
		updatedAt: now
	});
}

async function recordEnrolment(
	tx: Queryable,
	clock: Clock,
	grant: Grant<'participant:enrol'>,
	codes: string[]
): Promise<void> {
	await recordEvent(tx, clock, actorOf(grant), {
		kind: 'people-enrolled',
		item: 'participant-state',
		labId: grant.labId,
		studyId: grant.studyId,
		body: { codes }
	});
}

function withoutPerson({ line, cells, faults }: ReadRow): CheckedRow {
	return { line, cells, faults };
}
