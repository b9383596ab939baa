import { and, eq, inArray, sql } from 'drizzle-orm';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { booking, consent, participant } from '$lib/server/db/schema';
import { findFollowerState, type FollowerState } from './follower-state';
import { findTermsFor, type AmendmentPlan } from './load-amendments';

export type FollowersWanted = {
	studyId: string;
	participantId?: string;
	/** Asked where one visit has ended and the next one's first block is about to be decided. */
	atBoundary?: boolean;
};

export type FollowerRow = {
	participantId: string;
	code: string;
	versionNumber: number;
	state: FollowerState;
	/** The day on which the new consent text was signed; null while it is not. */
	signedAtMs: number | null;
	/** The next visit that is booked. */
	nextVisitMs: number | null;
};

/** Everybody of the study, or one person, and how they stand towards an amendment, by code. */
export async function loadFollowers(
	db: Queryable,
	clock: Clock,
	plan: AmendmentPlan,
	where: FollowersWanted
): Promise<FollowerRow[]> {
	const people = await db
		.select()
		.from(participant)
		.where(
			and(
				eq(participant.studyId, where.studyId),
				where.participantId ? eq(participant.id, where.participantId) : undefined
			)
		)
		.orderBy(participant.number);
	const ids = people.map(({ id }) => id);
	const signed = await loadSigned(db, ids, plan.target.content.consentTextVersion);
	const visits = await loadLiveVisits(db, ids);
	const mid = await findMidVisit(db, clock, { ids, atBoundary: where.atBoundary ?? false });
	return people.flatMap((person): FollowerRow[] => {
		const from = plan.versions.find(({ id }) => id === person.protocolVersionId);
		const terms = findTermsFor(plan, person.protocolVersionId);
		if (!from || !terms) return [];
		const own = visits.get(person.id) ?? [];
		const state = findFollowerState(
			{
				follows: from.number >= plan.target.number,
				isOver: person.withdrawnAt !== null || person.completedAt !== null,
				isInChain: own.length > 0 || person.allocatedAt !== null,
				hasConsented: signed.has(person.id),
				isMidVisit: mid.has(person.id)
			},
			terms
		);
		const coming = own.filter((startMs) => startMs > clock.now());
		return [
			{
				participantId: person.id,
				code: person.code,
				versionNumber: from.number,
				state,
				signedAtMs: signed.get(person.id) ?? null,
				nextVisitMs: coming.length > 0 ? Math.min(...coming) : null
			}
		];
	});
}

async function loadSigned(db: Queryable, ids: readonly string[], textVersion: string) {
	if (ids.length === 0) return new Map<string, number>();
	const rows = await db
		.select({ participantId: consent.participantId, signedAt: consent.signedAt })
		.from(consent)
		.where(and(inArray(consent.participantId, [...ids]), eq(consent.textVersion, textVersion)))
		.orderBy(consent.signedAt);
	return new Map(rows.map((row) => [row.participantId, row.signedAt.getTime()]));
}

/** Starts of visits that are booked or were attended. */
async function loadLiveVisits(db: Queryable, ids: readonly string[]) {
	const found = new Map<string, number[]>();
	if (ids.length === 0) return found;
	const rows = await db
		.select({ participantId: booking.participantId, during: booking.during })
		.from(booking)
		.where(
			and(inArray(booking.participantId, [...ids]), inArray(booking.state, ['booked', 'attended']))
		);
	for (const { participantId, during } of rows) {
		const own = found.get(participantId) ?? [];
		found.set(participantId, [...own, during.startsAt.getTime()]);
	}
	return found;
}

/**
 * Who cannot be moved over now: a visit is under way, a block of a visit to come is decided, or a
 * stored block still waits for its decision.
 */
async function findMidVisit(
	db: Queryable,
	clock: Clock,
	{ ids, atBoundary }: { ids: readonly string[]; atBoundary: boolean }
) {
	if (ids.length === 0) return new Set<string>();
	const now = new Date(clock.now()).toISOString();
	const rows = await db.execute<{ id: string }>(sql`
		select p.id from participant p
		where p.id in (${sql.join(
			ids.map((id) => sql`${id}::uuid`),
			sql`, `
		)}) and (
			(not ${atBoundary}::boolean and exists (
				select 1 from booking k where k.participant_id = p.id and k.state in ('booked', 'attended')
					and lower(k.occupied) <= ${now}::timestamptz and upper(k.occupied) > ${now}::timestamptz))
			or exists (
				select 1 from decision d
				join booking k on k.participant_id = d.participant_id and k.visit_number = d.visit_number
				where d.participant_id = p.id and k.state in ('booked', 'attended')
					and upper(k.during) > ${now}::timestamptz
					and not exists (
						select 1 from block b where b.participant_id = d.participant_id
							and b.visit_number = d.visit_number and b.block_number = d.block_number))
			or exists (
				select 1 from block b where b.participant_id = p.id and not exists (
					select 1 from decision d where d.participant_id = b.participant_id
						and d.visit_number = b.visit_number and d.block_number = b.block_number)))`);
	return new Set(rows.map(({ id }) => id));
}
