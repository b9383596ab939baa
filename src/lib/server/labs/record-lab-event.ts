import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { actorOf, recordEvent } from '$lib/server/record/record-event';

/** What can be changed of a lab. */
export type LabEvent =
	| 'lab-changed'
	| 'room-added'
	| 'room-changed'
	| 'room-removed'
	| 'rig-added'
	| 'rig-changed'
	| 'rig-key-set'
	| 'rig-retired'
	| 'rig-restored'
	| 'hours-set'
	| 'staff-added'
	| 'staff-changed'
	| 'staff-ended'
	| 'staff-restored'
	| 'holidays-added'
	| 'holiday-removed'
	| 'member-invited'
	| 'invitation-sent-again'
	| 'member-removed'
	| 'steward-given'
	| 'steward-ended';

/** Adds a change of the lab to the record, last in the caller's transaction. */
export async function recordLabEvent(
	tx: Queryable,
	clock: Clock,
	grant: Grant<'lab:manage'>,
	event: { kind: LabEvent; body: Record<string, unknown> }
): Promise<void> {
	await recordEvent(tx, clock, actorOf(grant), {
		...event,
		item: 'record',
		labId: grant.labId
	});
}
