import { boolean, integer, pgTable, text, bigint } from 'drizzle-orm/pg-core';
import { bytes, instant } from './columns';

/** One row: what made this database, and how far the demo clock was moved. */
export const instance = pgTable('instance', {
	onlyRow: boolean('only_row').primaryKey().default(true),
	kind: text('kind', { enum: ['demo', 'rehearsal', 'own'] }).notNull(),
	clockOffsetMs: bigint('clock_offset_ms', { mode: 'number' }).notNull().default(0),
	seed: integer('seed'),
	createdAt: instant('created_at').notNull().defaultNow()
});

/** The one-time link by which the first steward sets up an empty database. */
export const setupLink = pgTable('setup_link', {
	tokenHash: bytes('token_hash').primaryKey(),
	expiresAt: instant('expires_at').notNull(),
	usedAt: instant('used_at')
});
