import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import type { StudyRole } from '$lib/server/db/schema';
import { actorOf, recordEvent } from '$lib/server/record/record-event';

type RoleEvent = {
	kind: 'role-given' | 'role-confirmed' | 'role-ended';
	studyId: string;
	body: { personId: string; role: StudyRole };
};

/** Adds a change of the team to the study's record, last in the caller's transaction. */
export async function recordRoleEvent(
	tx: Queryable,
	clock: Clock,
	grant: Grant,
	event: RoleEvent
): Promise<void> {
	await recordEvent(tx, clock, actorOf(grant), { ...event, item: 'record', labId: grant.labId });
}
