import { date, index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import type { EnvelopeBreach } from '$lib/protocol/envelope';
import { follows, renewals, withoutRenewals } from '$lib/protocol/amendment';
import { person } from './account';
import { bytes, instant, randomId } from './columns';
import { decision } from './decision';
import { ethicsApproval, protocolVersion, study } from './study';

/** What a version that changes a running study declares about the people in flight. */
export const amendment = pgTable(
	'amendment',
	{
		protocolVersionId: uuid('protocol_version_id')
			.primaryKey()
			.references(() => protocolVersion.id),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		/** The version that ran when this one was frozen. */
		amendsId: uuid('amends_id')
			.notNull()
			.references(() => protocolVersion.id),
		/** First local day on which it may act. */
		effectiveOn: date('effective_on', { mode: 'string' }).notNull(),
		/** Whether people already enrolled follow it, or keep theirs. */
		follows: text('follows', { enum: follows }).notNull(),
		/** Who must consent anew. */
		renewal: text('renewal', { enum: renewals }).notNull(),
		/** What becomes of somebody who does not. */
		withoutRenewal: text('without_renewal', { enum: withoutRenewals }).notNull(),
		declaredBy: uuid('declared_by')
			.notNull()
			.references(() => person.id),
		declaredAt: instant('declared_at').notNull()
	},
	(table) => [index('amendment_study').on(table.studyId)]
);

/** The letter of an ethics board as it came. Rows are only ever added. */
export const ethicsLetter = pgTable(
	'ethics_letter',
	{
		id: randomId(),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		approvalId: uuid('approval_id')
			.notNull()
			.references(() => ethicsApproval.id),
		fileName: text('file_name').notNull(),
		mediaType: text('media_type', {
			enum: ['application/pdf', 'image/png', 'image/jpeg']
		}).notNull(),
		byteCount: integer('byte_count').notNull(),
		sha256: text('sha256').notNull(),
		content: bytes('content').notNull(),
		addedBy: uuid('added_by')
			.notNull()
			.references(() => person.id),
		addedAt: instant('added_at').notNull()
	},
	(table) => [
		uniqueIndex('ethics_letter_approval_id_sha256_key').on(table.approvalId, table.sha256),
		index('ethics_letter_study').on(table.studyId)
	]
);

/** A comment on one line or part of a version; an answer names the comment it answers. */
export const protocolComment = pgTable(
	'protocol_comment',
	{
		id: randomId(),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		protocolVersionId: uuid('protocol_version_id')
			.notNull()
			.references(() => protocolVersion.id),
		partKey: text('part_key').notNull(),
		/** Null for a comment on the whole part. */
		lineKey: text('line_key'),
		/** Everybody who reads the protocol, or only who may know how blocks are chosen. */
		scope: text('scope', { enum: ['rule', 'all'] }).notNull(),
		answersId: uuid('answers_id'),
		body: text('body').notNull(),
		writtenBy: uuid('written_by')
			.notNull()
			.references(() => person.id),
		writtenAt: instant('written_at').notNull(),
		resolvedBy: uuid('resolved_by').references(() => person.id),
		resolvedAt: instant('resolved_at')
	},
	(table) => [index('protocol_comment_version').on(table.protocolVersionId)]
);

/** Each decision, and each settlement, held against the approved envelope of its version. */
export const envelopeCheck = pgTable(
	'envelope_check',
	{
		id: randomId(),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		protocolHash: text('protocol_hash').notNull(),
		decisionId: uuid('decision_id')
			.notNull()
			.references(() => decision.id),
		source: text('source', { enum: ['decision', 'settlement'] }).notNull(),
		breaches: jsonb('breaches').$type<EnvelopeBreach[]>().notNull(),
		checkedAt: instant('checked_at').notNull()
	},
	(table) => [
		uniqueIndex('envelope_check_decision_id_source_key').on(table.decisionId, table.source),
		index('envelope_check_study').on(table.studyId, table.protocolHash)
	]
);
