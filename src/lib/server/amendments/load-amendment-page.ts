import { and, count, eq, isNotNull, isNull, lt, or, gte, sql } from 'drizzle-orm';
import type { AmendmentTerms } from '$lib/protocol/amendment';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { consent, participant, recordEvent } from '$lib/server/db/schema';
import { loadStudyZone } from '$lib/server/studies/load-study-zone';
import { inSteps } from '$lib/server/waiting/load-counts';
import { startOfLocalDay } from '$lib/time/start-of-local-day';
import { loadAmendmentPlan } from './load-amendments';
import { loadFollowers, type FollowerRow } from './load-followers';

/** In steps of five as of the last midnight; null below five. */
export type AmendmentCounts = {
	asOfMs: number;
	inFlight: number | null;
	signed: number | null;
	moved: number | null;
};

export type AmendmentPage = {
	number: number;
	terms: AmendmentTerms;
	runs: boolean;
	consentTextVersion: string;
	/** By code, for who enrols and records consent; null for other roles. */
	people: FollowerRow[] | null;
	/** For roles that see counts only. */
	counts: AmendmentCounts | null;
};

/** An amendment, who is affected and who consented anew; null for a version that declares none. */
export async function loadAmendmentPage(
	db: Queryable,
	clock: Clock,
	grant: Grant<'protocol:read'>,
	number: number
): Promise<AmendmentPage | null> {
	const { studyId } = grant;
	const plan = await loadAmendmentPlan(db, clock, { studyId, number });
	if (!plan?.target.terms) return null;
	const seesPeople =
		grant.sees('participant-state').has('yes') && grant.sees('consent-record').has('yes');
	const seesCounts = grant.sees('participant-state').has('counts');
	const { consentTextVersion } = plan.target.content;
	return {
		number,
		terms: plan.target.terms,
		runs: plan.runs,
		consentTextVersion,
		people: seesPeople ? await loadFollowers(db, clock, plan, { studyId }) : null,
		counts:
			seesCounts && !seesPeople ? await countPeople(db, clock, grant, consentTextVersion) : null
	};
}

async function countPeople(
	db: Queryable,
	clock: Clock,
	grant: Grant<'protocol:read'>,
	textVersion: string
): Promise<AmendmentCounts> {
	const { studyId } = grant;
	const asOfMs = startOfLocalDay(clock.now(), await loadStudyZone(db, studyId));
	const midnight = new Date(asOfMs);
	const stillIn = (column: typeof participant.completedAt) =>
		or(isNull(column), gte(column, midnight));
	const [inFlight] = await db
		.select({ value: count() })
		.from(participant)
		.where(
			and(
				eq(participant.studyId, studyId),
				lt(participant.enrolledAt, midnight),
				stillIn(participant.completedAt),
				stillIn(participant.withdrawnAt)
			)
		);
	const [signed] = await db
		.select({ value: sql<number>`count(distinct ${consent.participantId})::int` })
		.from(consent)
		.innerJoin(participant, eq(participant.id, consent.participantId))
		.where(
			and(
				eq(participant.studyId, studyId),
				eq(consent.textVersion, textVersion),
				lt(consent.recordedAt, midnight)
			)
		);
	const [moved] = await db
		.select({ value: sql<number>`count(distinct ${recordEvent.participantId})::int` })
		.from(recordEvent)
		.where(
			and(
				eq(recordEvent.studyId, studyId),
				eq(recordEvent.kind, 'moved-to-version'),
				isNotNull(recordEvent.participantId),
				lt(recordEvent.at, midnight)
			)
		);
	const tell = (row: { value: number } | undefined) => inSteps(row?.value ?? 0);
	return { asOfMs, inFlight: tell(inFlight), signed: tell(signed), moved: tell(moved) };
}
