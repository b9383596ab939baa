import { canonicalJson } from '$lib/server/record/canonical-json';
import type { Item } from '$lib/server/access/visibility';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { recordEvent as table } from '$lib/server/db/schema';

export type Actor =
	| { kind: 'person'; personId: string }
	| { kind: 'participant' }
	| { kind: 'rig'; rigId: string }
	| { kind: 'system' };

export type RecordedEvent = {
	kind: string;
	/** The row of the visibility table that says who may see this event. */
	item: Item;
	labId?: string | undefined;
	studyId?: string | undefined;
	participantId?: string | undefined;
	/** Plain data without personal content. */
	body?: Record<string, unknown>;
};

/** The actor of a grant. */
export function actorOf(grant: Grant): Actor {
	return { kind: 'person', personId: grant.personId };
}

/**
 * Adds one event to the append-only record, in the caller's transaction. The database chains the
 * hashes; call it last in a transaction, as it takes the chain's lock until the end.
 */
export async function recordEvent(
	tx: Queryable,
	clock: Clock,
	actor: Actor,
	event: RecordedEvent
): Promise<void> {
	await tx.insert(table).values({
		at: new Date(clock.now()),
		labId: event.labId ?? null,
		studyId: event.studyId || null,
		participantId: event.participantId ?? null,
		actorId: actor.kind === 'person' ? actor.personId : actor.kind === 'rig' ? actor.rigId : null,
		actorKind: actor.kind,
		kind: event.kind,
		item: event.item,
		body: canonicalJson(event.body ?? {})
	});
}
