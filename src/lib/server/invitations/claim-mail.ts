import {
	and,
	asc,
	desc,
	eq,
	exists,
	inArray,
	isNull,
	lt,
	lte,
	notExists,
	or,
	sql
} from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import { findHeldForConsent } from '$lib/server/amendments/held-for-consent';
import type { Clock } from '$lib/server/clock';
import type { Database, Transaction } from '$lib/server/db/client';
import { booking, outbox, studyPause } from '$lib/server/db/schema';
import { ATTEMPTS_MAX } from '$lib/server/mail/retry-delay';
import { findMissingGates } from '$lib/server/studies/load-gates';

const LEASE_MS = 15 * 60_000;

export type ClaimedMail = typeof outbox.$inferSelect & {
	/** An earlier attempt may have sent it: its answer never came, or its process died. */
	mayHaveGone: boolean;
	visitStartMs: number | undefined;
};

/**
 * Takes the next mail that is due, so that no other process sends it, or null when none is.
 *
 * Mails of one visit go strictly by sequence: none while an earlier one is being sent. Requests
 * wait while their study or participant is paused or a gate is shut; cancellations and the
 * confirmation of a withdrawal do not.
 */
export async function claimNextMail(db: Database, clock: Clock): Promise<ClaimedMail | null> {
	return db.transaction(async (tx) => {
		const { shut, held } = await findShut(tx, clock);
		const now = new Date(clock.now());
		const [row] = await tx
			.select({ mail: outbox, during: booking.during })
			.from(outbox)
			.leftJoin(booking, eq(booking.id, outbox.bookingId))
			.where(isDue(tx, now, { shut, held }))
			.orderBy(desc(outbox.isUrgent), asc(outbox.dueAt), asc(outbox.sequence))
			.limit(1)
			.for('update', { of: outbox, skipLocked: true });
		if (!row) return null;
		const leaseUntil = new Date(clock.now() + LEASE_MS);
		const attempts = row.mail.attempts + 1;
		await tx.update(outbox).set({ leaseUntil, attempts }).where(eq(outbox.id, row.mail.id));
		return {
			...row.mail,
			leaseUntil,
			attempts,
			mayHaveGone: row.mail.state === 'unknown' || row.mail.leaseUntil !== null,
			visitStartMs: row.during?.startsAt.getTime()
		};
	});
}

type Shut = { shut: string[]; held: string[] };

/** Studies with a due request whose gates are not all open, and people whom an amendment stops. */
async function findShut(tx: Transaction, clock: Clock): Promise<Shut> {
	const due = await tx
		.selectDistinct({ studyId: outbox.studyId })
		.from(outbox)
		.where(
			and(inArray(outbox.state, ['waiting', 'unknown']), lte(outbox.dueAt, new Date(clock.now())))
		);
	const [shut, held]: [string[], string[]] = [[], []];
	for (const { studyId } of due) {
		if (!studyId) continue;
		if ((await findMissingGates(tx, clock, studyId)).length > 0) shut.push(studyId);
		const people = await findHeldForConsent(tx, clock, { studyId });
		held.push(...people.map(({ participantId }) => participantId));
	}
	return { shut, held };
}

function isDue(tx: Transaction, now: Date, closed: Shut) {
	return and(
		or(
			eq(outbox.state, 'waiting'),
			and(
				eq(outbox.state, 'unknown'),
				inArray(outbox.kind, ['invitation', 'moved', 'cancelled']),
				lt(outbox.attempts, ATTEMPTS_MAX)
			)
		),
		lte(outbox.dueAt, now),
		or(isNull(outbox.leaseUntil), lt(outbox.leaseUntil, now)),
		notExists(otherMail(tx, sql`other.lease_until >= ${now.toISOString()}::timestamptz`)),
		notExists(
			otherMail(tx, sql`other.sequence > ${outbox.sequence} and other.state <> 'superseded'`)
		),
		or(inArray(outbox.kind, ['cancelled', 'withdrawn']), mayRequest(tx, now, closed))
	);
}

/** Other mails about the same visit for which a condition holds. */
function otherMail(tx: Transaction, condition: ReturnType<typeof sql>) {
	const other = alias(outbox, 'other');
	return tx
		.select({ one: sql`1` })
		.from(other)
		.where(and(eq(other.bookingId, outbox.bookingId), condition));
}

function mayRequest(tx: Transaction, now: Date, { shut, held }: Shut) {
	const pause = tx
		.select({ one: sql`1` })
		.from(studyPause)
		.where(and(eq(studyPause.participantId, outbox.participantId), isNull(studyPause.liftedAt)));
	const coming = tx
		.select({ one: sql`1` })
		.from(alias(booking, 'visit'))
		.where(
			sql`visit.id = ${outbox.bookingId} and visit.state = 'booked' and lower(visit.during) > ${now.toISOString()}::timestamptz`
		);
	const studyId = outbox.studyId;
	const isShut = shut.length === 0 ? sql`false` : inArray(studyId, shut);
	const isHeld = held.length === 0 ? sql`false` : inArray(outbox.participantId, held);
	return and(sql`not (${isShut})`, sql`not (${isHeld})`, notExists(pause), exists(coming));
}
