import { and, count, eq, isNotNull, lt } from 'drizzle-orm';
import type { PgColumn } from 'drizzle-orm/pg-core';
import { startOfLocalDay } from '$lib/time/start-of-local-day';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { participant } from '$lib/server/db/schema';
import { loadLabZone } from './chain-items';

/** How many people, in steps of five; null while there are fewer than five. */
export type ProgressCounts = {
	asOfMs: number;
	enrolled: number | null;
	consented: number | null;
	baselinePassed: number | null;
	completed: number | null;
};

/**
 * Progress over all arms together for roles that see counts only: as of the last midnight, from five
 * people on, and changed only when five more have joined.
 */
export async function loadCounts(
	db: Queryable,
	clock: Clock,
	grant: Grant<'today:read'>
): Promise<ProgressCounts | null> {
	if (!grant.sees('participant-state').has('counts')) return null;
	const asOfMs = startOfLocalDay(clock.now(), await loadLabZone(db, grant.labId));
	const before = async (column: PgColumn) => {
		const [row] = await db
			.select({ value: count() })
			.from(participant)
			.where(
				and(eq(participant.studyId, grant.studyId), isNotNull(column), lt(column, new Date(asOfMs)))
			);
		return inSteps(row?.value ?? 0);
	};
	return {
		asOfMs,
		enrolled: await before(participant.enrolledAt),
		consented: await before(participant.consentedAt),
		baselinePassed: await before(participant.baselinePassedAt),
		completed: await before(participant.completedAt)
	};
}

/** The largest multiple of five that is reached; null below five. */
export function inSteps(value: number): number | null {
	return value < 5 ? null : value - (value % 5);
}
