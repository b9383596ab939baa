import { and, count, desc, eq, inArray } from 'drizzle-orm';
import { describeEvent } from '$lib/record/event-words';
import type { Grant } from '$lib/server/access/require-permission';
import { items, type Item, type Level } from '$lib/server/access/visibility';
import type { Database } from '$lib/server/db/client';
import { lab, participant, person, recordEvent } from '$lib/server/db/schema';
import { loadEventTags } from './load-event-tags';
import { verifyChain } from './verify-chain';

export type RecordRow = {
	/** Place among the events this reader may see, from 1 for the oldest. */
	number: number;
	atMs: number;
	who: string;
	what: string;
	about: string | null;
	/** What it counts as in the estimand, with the strategy; null: nothing declared. */
	countsAs: string | null;
};
export type RecordPage = {
	zone: string;
	rows: RecordRow[];
	/** Number of the first event of the next page; null at the end. */
	before: number | null;
	/** Whether every hash of the chain fits; counts would tell blinded roles too much. */
	isWhole: boolean;
};

const pageSize = 100;

/** Levels at which somebody may read that an event of an item happened, and to whom. */
const readable: readonly Level[] = ['yes', 'design', 'plain'];

/**
 * The study's record, newest first: each event is there only for roles that may see its item, and
 * never shows more than who, what, when and which code. Events are numbered among those the reader
 * may see: their place in the whole chain, or its hashes, would tell what happened in between.
 */
export async function loadRecord(
	db: Database,
	grant: Grant<'record:read'>,
	{ before }: { before: number | null }
): Promise<RecordPage> {
	const mine = and(
		eq(recordEvent.studyId, grant.studyId),
		inArray(recordEvent.item, findReadableItems(grant))
	);
	const [[place], [all]] = await Promise.all([
		db.select({ zone: lab.zone }).from(lab).where(eq(lab.id, grant.labId)),
		db.select({ count: count() }).from(recordEvent).where(mine)
	]);
	const total = all?.count ?? 0;
	const newest = Math.min(before ?? total, total);
	const rows = await db
		.select({ event: recordEvent, actor: person.name, code: participant.code })
		.from(recordEvent)
		.leftJoin(person, eq(person.id, recordEvent.actorId))
		.leftJoin(participant, eq(participant.id, recordEvent.participantId))
		.where(mine)
		.orderBy(desc(recordEvent.seq))
		.offset(total - newest)
		.limit(pageSize);
	const tags = await loadEventTags(
		db,
		rows.flatMap(({ event }) => event.participantId ?? [])
	);
	return {
		zone: place?.zone ?? 'UTC',
		rows: rows.map(({ event, actor, code }, index) => ({
			number: newest - index,
			atMs: event.at.getTime(),
			who: actor ?? (event.actorKind === 'participant' ? 'a participant' : 'Ovalry'),
			what: describeEvent(event.kind),
			about: code,
			countsAs: tags.get(event.seq) ?? null
		})),
		before: newest > pageSize ? newest - pageSize : null,
		isWhole: (await verifyChain(db)).ok
	};
}

/** The items whose events this person may read. */
export function findReadableItems(grant: Pick<Grant, 'sees'>): Item[] {
	return items.filter((item) => readable.some((level) => grant.sees(item).has(level)));
}
