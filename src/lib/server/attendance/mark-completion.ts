import { and, eq } from 'drizzle-orm';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { booking, participant, protocolVersion } from '$lib/server/db/schema';

/**
 * Notes that a person has come to every visit of their protocol, or no longer has, after a visit was
 * said to be attended or missed. Who is allocated goes on to the end of the timeline; data that come
 * in later are read all the same.
 */
export async function markCompletion(
	tx: Queryable,
	clock: Clock,
	participantId: string
): Promise<void> {
	const [person] = await tx
		.select({
			state: participant.state,
			completedAt: participant.completedAt,
			content: protocolVersion.content
		})
		.from(participant)
		.innerJoin(protocolVersion, eq(protocolVersion.id, participant.protocolVersionId))
		.where(eq(participant.id, participantId));
	if (!person) return;
	const came = await loadAttended(tx, participantId);
	const isComplete = person.content.visits.every(({ number }) => came.has(number));
	if (isComplete === (person.completedAt !== null)) return;
	const { state } = person;
	await tx
		.update(participant)
		.set({
			completedAt: isComplete ? new Date(clock.now()) : null,
			...(isComplete && state === 'allocated' ? { state: 'completed' } : {}),
			...(!isComplete && state === 'completed' ? { state: 'allocated' } : {})
		})
		.where(eq(participant.id, participantId));
}

async function loadAttended(tx: Queryable, participantId: string): Promise<Set<number>> {
	const rows = await tx
		.select({ visitNumber: booking.visitNumber })
		.from(booking)
		.where(and(eq(booking.participantId, participantId), eq(booking.state, 'attended')));
	return new Set(rows.map(({ visitNumber }) => visitNumber));
}
