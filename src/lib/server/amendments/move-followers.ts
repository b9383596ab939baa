import { eq, isNull } from 'drizzle-orm';
import type { Clock } from '$lib/server/clock';
import type { Database, Transaction } from '$lib/server/db/client';
import { amendment, participant, study } from '$lib/server/db/schema';
import { recordEvent } from '$lib/server/record/record-event';
import { loadAmendmentPlan, type AmendmentPlan } from './load-amendments';
import { loadFollowers } from './load-followers';

/**
 * Moves everybody over who is due to follow an amendment, each in a transaction of their own; the
 * move is recorded. Reads neither arms nor decisions' content: it is the same in every arm.
 *
 * @returns how many people were moved
 */
export async function moveFollowers(db: Database, clock: Clock): Promise<number> {
	const studies = await db
		.selectDistinct({ studyId: amendment.studyId })
		.from(amendment)
		.innerJoin(study, eq(study.id, amendment.studyId))
		.where(isNull(study.closedAt));
	let count = 0;
	for (const { studyId } of studies) {
		const plan = await loadAmendmentPlan(db, clock, { studyId });
		if (!plan?.runs) continue;
		const people = await loadFollowers(db, clock, plan, { studyId });
		for (const { participantId } of people.filter(({ state }) => state === 'due')) {
			const moved = await db.transaction((tx) =>
				moveOne(tx, clock, plan, { studyId, participantId })
			);
			count += moved ? 1 : 0;
		}
	}
	return count;
}

/**
 * Moves one person over if they are due, inside the caller's transaction, which holds their row.
 * Asked before the first block of a visit is decided: later visits follow the new version whole.
 */
export async function moveIfDue(
	tx: Transaction,
	clock: Clock,
	who: { studyId: string; participantId: string }
): Promise<boolean> {
	const [any] = await tx
		.select({ id: amendment.protocolVersionId })
		.from(amendment)
		.where(eq(amendment.studyId, who.studyId))
		.limit(1);
	if (!any) return false;
	const plan = await loadAmendmentPlan(tx, clock, { studyId: who.studyId });
	return plan?.runs ? moveOne(tx, clock, plan, { ...who, atBoundary: true }) : false;
}

type Who = { studyId: string; participantId: string; atBoundary?: boolean };

async function moveOne(
	tx: Transaction,
	clock: Clock,
	plan: AmendmentPlan,
	{ studyId, participantId, atBoundary = false }: Who
): Promise<boolean> {
	// The row is held first: whoever decides, books or withdraws meanwhile waits, or was waited for.
	const person = eq(participant.id, participantId);
	await tx.select({ id: participant.id }).from(participant).where(person).for('update');
	const [row] = await loadFollowers(tx, clock, plan, { studyId, participantId, atBoundary });
	if (row?.state !== 'due') return false;
	const from = plan.versions.find(({ number }) => number === row.versionNumber);
	await tx.update(participant).set({ protocolVersionId: plan.target.id }).where(person);
	await recordEvent(
		tx,
		clock,
		{ kind: 'system' },
		{
			kind: 'moved-to-version',
			item: 'participant-state',
			studyId,
			participantId,
			body: {
				fromNumber: row.versionNumber,
				fromHash: from?.hash ?? '',
				toNumber: plan.target.number,
				toHash: plan.target.hash
			}
		}
	);
	return true;
}
