import { bigint, index, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import { instant } from './columns';

/**
 * The append-only record of who did what. Each row's hash covers the one before it (see migrations).
 * `body` is canonical JSON and holds hashes of personal content, never the content.
 */
export const recordEvent = pgTable(
	'record_event',
	{
		seq: bigint('seq', { mode: 'number' }).primaryKey().default(0),
		at: instant('at').notNull(),
		labId: uuid('lab_id'),
		studyId: uuid('study_id'),
		participantId: uuid('participant_id'),
		actorId: uuid('actor_id'),
		/** What acted: person, participant, rig, system. */
		actorKind: text('actor_kind').notNull(),
		/** What happened, such as booking-moved. */
		kind: text('kind').notNull(),
		/** The row of the visibility table that says who may see this event. */
		item: text('item').notNull(),
		body: text('body').notNull(),
		previousHash: text('previous_hash').notNull().default(''),
		hash: text('hash').notNull().default('')
	},
	(table) => [index('record_event_study').on(table.studyId, table.seq)]
);
