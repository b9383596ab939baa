import { eq } from 'drizzle-orm';
import type { Transaction } from '$lib/server/db/client';
import { participant } from '$lib/server/db/schema';
import { recordEvent } from '$lib/server/record/record-event';
import type { DecideServices } from './decide-for-person';
import { slotKey } from './find-next-slot';
import type { PersonOnRecord } from './load-person';

/**
 * Allocates a person once every baseline block is in and none is red. True when something changed.
 * Quality is judged without arm, before there is one.
 */
export async function passBaseline(
	tx: Transaction,
	{ clock, allocate }: DecideServices,
	person: PersonOnRecord
): Promise<boolean> {
	if (person.arm !== null || !hasPassedBaseline(person)) return false;
	if (person.state !== 'baseline-done') {
		await tx
			.update(participant)
			.set({ state: 'baseline-done', baselinePassedAt: new Date(clock.now()) })
			.where(eq(participant.id, person.id));
		await recordEvent(
			tx,
			clock,
			{ kind: 'system' },
			{
				kind: 'baseline-passed',
				item: 'participant-state',
				studyId: person.studyId,
				participantId: person.id
			}
		);
	}
	return allocate(tx, person.id);
}

function hasPassedBaseline(person: PersonOnRecord): boolean {
	const baseline = person.slots.filter((slot) => slot.purpose === 'baseline');
	return baseline.every((slot) => {
		const stored = person.blocks.get(slotKey(slot));
		return stored !== undefined && stored.quality !== 'red';
	});
}
