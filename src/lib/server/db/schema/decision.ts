import type { DecisionKind } from '$scheduler/policies/policy-memory';
import { index, integer, pgTable, text, uniqueIndex, uuid, jsonb } from 'drizzle-orm/pg-core';
import { person } from './account';
import { bytes, instant, randomId } from './columns';
import { rig } from './lab';
import { participant } from './participant';
import { study } from './study';

/**
 * The decision for one block (`visitNumber`, `blockNumber` is the block it decides), of every arm.
 * `inputs` and `output` are canonical JSON, kept as text so that replay compares bytes.
 */
export const decision = pgTable(
	'decision',
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
		protocolHash: text('protocol_hash').notNull(),
		policyHash: text('policy_hash').notNull(),
		engineVersion: text('engine_version').notNull(),
		runtimeVersion: text('runtime_version').notNull(),
		inputsDigest: text('inputs_digest').notNull(),
		inputs: text('inputs').notNull(),
		output: text('output').notNull(),
		kind: text('kind').$type<DecisionKind>().notNull(),
		code: text('code').notNull(),
		/** Empty when inside the guard rails; else why a person must look. */
		holdReasons: jsonb('hold_reasons')
			.$type<{ code: string; values: Record<string, number> }[]>()
			.notNull(),
		state: text('state', { enum: ['automatic', 'held', 'settled', 'fallback'] }).notNull(),
		decidedAt: instant('decided_at').notNull(),
		/** When others see "ready", the same in every arm; null until the visit is booked. */
		readyAt: instant('ready_at')
	},
	(table) => [
		uniqueIndex('decision_once').on(table.participantId, table.visitNumber, table.blockNumber),
		index('decision_study').on(table.studyId, table.state)
	]
);

/** How a held decision was settled: by the approver, or by the declared fallback at its hour. */
export const settlement = pgTable('settlement', {
	decisionId: uuid('decision_id')
		.primaryKey()
		.references(() => decision.id),
	action: text('action', { enum: ['use', 'change', 'plain-practice', 'fallback'] }).notNull(),
	/** The block as it is to run after this settlement (kind and parameters), canonical JSON. */
	block: text('block').notNull(),
	reason: text('reason').notNull(),
	settledBy: uuid('settled_by').references(() => person.id),
	settledAt: instant('settled_at').notNull()
});

/** A block handed to a rig: signed by the server, encrypted to the rig, padded to one size. */
export const bundle = pgTable(
	'bundle',
	{
		id: randomId(),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		participantId: uuid('participant_id')
			.notNull()
			.references(() => participant.id),
		decisionId: uuid('decision_id')
			.notNull()
			.references(() => decision.id),
		rigId: uuid('rig_id')
			.notNull()
			.references(() => rig.id),
		fileName: text('file_name').notNull(),
		content: bytes('content').notNull(),
		issuedAt: instant('issued_at').notNull(),
		expiresAt: instant('expires_at').notNull(),
		revokedAt: instant('revoked_at')
	},
	(table) => [index('bundle_decision').on(table.decisionId)]
);
