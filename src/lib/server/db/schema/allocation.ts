import {
	doublePrecision,
	integer,
	jsonb,
	pgTable,
	text,
	uniqueIndex,
	uuid
} from 'drizzle-orm/pg-core';
import { person } from './account';
import { bytes, instant, randomId } from './columns';
import { participant } from './participant';
import { study } from './study';

/** How the sealed sequence is made; known to the unblinded statistician only until unblinding. */
export type AllocationMethod = { arms: string[]; blockSizes: number[] };

/** A sealed allocation sequence: a 256-bit seed under a key that is not in the database. */
export const allocationSeal = pgTable(
	'allocation_seal',
	{
		id: randomId(),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		protocolHash: text('protocol_hash').notNull(),
		/** Encrypted seed and nonce. */
		sealedSeed: bytes('sealed_seed').notNull(),
		/** SHA-256 commitment over seed and nonce, hexadecimal; published before the first person. */
		commitment: text('commitment').notNull(),
		method: jsonb('method').$type<AllocationMethod>().notNull(),
		sealedBy: uuid('sealed_by')
			.notNull()
			.references(() => person.id),
		sealedAt: instant('sealed_at').notNull()
	},
	(table) => [uniqueIndex('allocation_seal_version').on(table.studyId, table.protocolHash)]
);

/** The arm of one participant. Rows are only ever added, one per participant, in order. */
export const allocation = pgTable(
	'allocation',
	{
		participantId: uuid('participant_id')
			.primaryKey()
			.references(() => participant.id),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		sealId: uuid('seal_id')
			.notNull()
			.references(() => allocationSeal.id),
		sequenceIndex: integer('sequence_index').notNull(),
		arm: text('arm').notNull(),
		allocatedAt: instant('allocated_at').notNull()
	},
	(table) => [uniqueIndex('allocation_sequence').on(table.sealId, table.sequenceIndex)]
);

/** Spread of the two traits by which people are paired, over all baselines known at the first pairing. */
export type PairScales = { logVolumeSd: number; meanErrorSd: number };

/** Whom a participant of a yoked arm follows. Rows are only ever added; a master has one partner. */
export const yokedPair = pgTable('yoked_pair', {
	participantId: uuid('participant_id')
		.primaryKey()
		.references(() => participant.id),
	masterId: uuid('master_id')
		.notNull()
		.unique()
		.references(() => participant.id),
	studyId: uuid('study_id')
		.notNull()
		.references(() => study.id),
	/** How unlike the two baselines are, in spreads of all baselines. */
	distance: doublePrecision('distance').notNull(),
	scales: jsonb('scales').$type<PairScales>().notNull(),
	pairedAt: instant('paired_at').notNull()
});
