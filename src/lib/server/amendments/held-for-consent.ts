import { and, eq } from 'drizzle-orm';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { amendment } from '$lib/server/db/schema';
import { loadAmendmentPlan } from './load-amendments';
import { loadFollowers } from './load-followers';

export type HeldPerson = { participantId: string; code: string; textVersion: string };

/**
 * Who is stopped until they consent anew, as the amendment that runs declares: nothing is booked,
 * told or issued for them meanwhile.
 */
export async function findHeldForConsent(
	db: Queryable,
	clock: Clock,
	where: { studyId: string; participantId?: string }
): Promise<HeldPerson[]> {
	const [any] = await db
		.select({ id: amendment.protocolVersionId })
		.from(amendment)
		.where(and(eq(amendment.studyId, where.studyId), eq(amendment.withoutRenewal, 'stops')))
		.limit(1);
	if (!any) return [];
	const plan = await loadAmendmentPlan(db, clock, { studyId: where.studyId });
	if (!plan) return [];
	const textVersion = plan.target.content.consentTextVersion;
	const people = await loadFollowers(db, clock, plan, where);
	return people
		.filter(({ state }) => state === 'stopped')
		.map(({ participantId, code }) => ({ participantId, code, textVersion }));
}
