import { and, desc, eq, inArray, lt } from 'drizzle-orm';
import { describeEvent } from '$lib/record/event-words';
import type { Grant } from '$lib/server/access/require-permission';
import { items, type Item, type Level } from '$lib/server/access/visibility';
import type { Database } from '$lib/server/db/client';
import { lab, participant, person, recordEvent } from '$lib/server/db/schema';
import { verifyChain } from './verify-chain';

export type RecordRow = {
	seq: string;
	atMs: number;
	who: string;
	what: string;
	about: string | null;
};
export type RecordPage = {
	zone: string;
	rows: RecordRow[];
	/** Where the next page begins; null at the end. */
	before: number | null;
	/** Whether every hash of the chain fits; counts would tell blinded roles too much. */
	isWhole: boolean;
};

const pageSize = 100;

/** Levels at which somebody may read that an event of an item happened, and to whom. */
const readable: readonly Level[] = ['yes', 'design', 'plain'];

/**
 * The study's record, newest first: each event is there only for roles that may see its item, and
 * never shows more than who, what, when and which code.
 */
export async function loadRecord(
	db: Database,
	grant: Grant<'record:read'>,
	{ before }: { before: number | null }
): Promise<RecordPage> {
	const visible = findReadableItems(grant);
	const rows = visible.length === 0 ? [] : await selectEvents(db, grant, { visible, before });
	const [place] = await db.select({ zone: lab.zone }).from(lab).where(eq(lab.id, grant.labId));
	const shown = rows.slice(0, pageSize);
	return {
		zone: place?.zone ?? 'UTC',
		rows: shown.map(({ event, actor, code }) => ({
			seq: event.hash.slice(0, 12),
			atMs: event.at.getTime(),
			who: actor ?? (event.actorKind === 'participant' ? 'a participant' : 'Ovalry'),
			what: describeEvent(event.kind),
			about: code
		})),
		before: rows.length > pageSize ? (shown.at(-1)?.event.seq ?? null) : null,
		isWhole: (await verifyChain(db)).ok
	};
}

/** The items whose events this person may read. */
export function findReadableItems(grant: Pick<Grant, 'sees'>): Item[] {
	return items.filter((item) => readable.some((level) => grant.sees(item).has(level)));
}

type Wanted = { visible: Item[]; before: number | null };

function selectEvents(db: Database, grant: Grant, { visible, before }: Wanted) {
	return db
		.select({ event: recordEvent, actor: person.name, code: participant.code })
		.from(recordEvent)
		.leftJoin(person, eq(person.id, recordEvent.actorId))
		.leftJoin(participant, eq(participant.id, recordEvent.participantId))
		.where(
			and(
				eq(recordEvent.studyId, grant.studyId),
				inArray(recordEvent.item, visible),
				before === null ? undefined : lt(recordEvent.seq, before)
			)
		)
		.orderBy(desc(recordEvent.seq))
		.limit(pageSize + 1);
}
