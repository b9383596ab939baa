import {
	doublePrecision,
	index,
	integer,
	jsonb,
	pgTable,
	primaryKey,
	text,
	uniqueIndex,
	uuid
} from 'drizzle-orm/pg-core';
import type { Mapping } from '$lib/intake/column-use';
import { person } from './account';
import { bytes, instant, randomId } from './columns';
import { participant } from './participant';
import { study } from './study';

/** A trial file as it came, write-once. */
export const upload = pgTable(
	'upload',
	{
		id: randomId(),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		fileName: text('file_name').notNull(),
		sha256: text('sha256').notNull(),
		content: bytes('content').notNull(),
		mapping: jsonb('mapping').$type<Mapping>().notNull(),
		rowCount: integer('row_count').notNull(),
		trialCount: integer('trial_count').notNull(),
		uploadedBy: uuid('uploaded_by')
			.notNull()
			.references(() => person.id),
		uploadedAt: instant('uploaded_at').notNull()
	},
	(table) => [uniqueIndex('upload_once').on(table.studyId, table.sha256)]
);

/** One block of one visit as it was run. */
export const block = pgTable(
	'block',
	{
		id: randomId(),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		participantId: uuid('participant_id')
			.notNull()
			.references(() => participant.id),
		visitNumber: integer('visit_number').notNull(),
		blockNumber: integer('block_number').notNull(),
		uploadId: uuid('upload_id')
			.notNull()
			.references(() => upload.id),
		trialCount: integer('trial_count').notNull(),
		quality: text('quality', { enum: ['green', 'amber', 'red'] }).notNull(),
		/** Technical codes, computed without arm: missing, out-of-range, count, stuck. */
		qualityCodes: jsonb('quality_codes').$type<string[]>().notNull().default([]),
		scoredAt: instant('scored_at').notNull()
	},
	(table) => [
		uniqueIndex('block_once').on(table.participantId, table.visitNumber, table.blockNumber),
		index('block_study').on(table.studyId)
	]
);

/** One trial: the execution variables in the task's order and units; null where the file was blank. */
export const trial = pgTable(
	'trial',
	{
		blockId: uuid('block_id')
			.notNull()
			.references(() => block.id),
		number: integer('number').notNull(),
		execution: doublePrecision('execution').array().$type<(number | null)[]>().notNull()
	},
	(table) => [primaryKey({ columns: [table.blockId, table.number] })]
);
