import { sql } from 'drizzle-orm';
import { index, integer, jsonb, pgTable, text, uniqueIndex, uuid, date } from 'drizzle-orm/pg-core';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { person } from './account';
import { instant, randomId } from './columns';
import { lab } from './lab';

export const study = pgTable('study', {
	id: randomId(),
	labId: uuid('lab_id')
		.notNull()
		.references(() => lab.id),
	workingTitle: text('working_title').notNull(),
	/** The only title in mails, files and participants' pages. */
	publicTitle: text('public_title').notNull(),
	/** Letters before the number in a participant's code, such as TW in TW-017. */
	codePrefix: text('code_prefix').notNull(),
	phone: text('phone').notNull().default(''),
	createdBy: uuid('created_by')
		.notNull()
		.references(() => person.id),
	createdAt: instant('created_at').notNull().defaultNow(),
	closedAt: instant('closed_at'),
	/** Grows with every change of bookings, so that a stale proposal is refused. */
	planVersion: integer('plan_version').notNull().default(0)
});

export const studyRoles = [
	'investigator',
	'coordinator',
	'operator',
	'statistician',
	'unblinded-statistician',
	'approver',
	'monitor'
] as const;
export type StudyRole = (typeof studyRoles)[number];

/**
 * A role in one study, one row for each time it was given. Rows are ended, never deleted or given
 * again: forbidden pairs hold for earlier roles too.
 * A role that sees arms counts only once a second person has confirmed it.
 */
export const studyRole = pgTable(
	'study_role',
	{
		id: randomId(),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		personId: uuid('person_id')
			.notNull()
			.references(() => person.id),
		role: text('role', { enum: studyRoles }).notNull(),
		givenBy: uuid('given_by')
			.notNull()
			.references(() => person.id),
		givenAt: instant('given_at').notNull().defaultNow(),
		confirmedBy: uuid('confirmed_by').references(() => person.id),
		confirmedAt: instant('confirmed_at'),
		endedAt: instant('ended_at')
	},
	(table) => [
		index('study_role_person').on(table.personId, table.studyId),
		uniqueIndex('study_role_once')
			.on(table.studyId, table.personId, table.role)
			.where(sql`ended_at IS NULL`)
	]
);

/** A pause of the whole study, or of one participant; lifting it needs two different people. */
export const studyPause = pgTable('study_pause', {
	id: randomId(),
	studyId: uuid('study_id')
		.notNull()
		.references(() => study.id),
	participantId: uuid('participant_id'),
	reason: text('reason').notNull(),
	pausedBy: uuid('paused_by').references(() => person.id),
	pausedAt: instant('paused_at').notNull(),
	firstLiftBy: uuid('first_lift_by').references(() => person.id),
	secondLiftBy: uuid('second_lift_by').references(() => person.id),
	liftedAt: instant('lifted_at')
});

/** A task of the lab, versioned; versions never change. A protocol holds its own copy of the record. */
export const task = pgTable(
	'task',
	{
		id: randomId(),
		labId: uuid('lab_id')
			.notNull()
			.references(() => lab.id),
		name: text('name').notNull(),
		version: integer('version').notNull(),
		record: jsonb('record').$type<Record<string, unknown>>().notNull(),
		/** What changed and why, in the words of whoever kept it. */
		note: text('note').notNull().default(''),
		createdBy: uuid('created_by')
			.notNull()
			.references(() => person.id),
		createdAt: instant('created_at').notNull().defaultNow()
	},
	(table) => [uniqueIndex('task_version').on(table.labId, table.name, table.version)]
);

/** A protocol version. Once frozen (hash set) its content can never change. */
export const protocolVersion = pgTable(
	'protocol_version',
	{
		id: randomId(),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		number: integer('number').notNull(),
		content: jsonb('content').$type<ProtocolContent>().notNull(),
		/** Grows with each save of a draft: a stale save is refused. */
		revision: integer('revision').notNull().default(0),
		/** SHA-256 over the canonical JSON of the content, hexadecimal. */
		hash: text('hash'),
		frozenAt: instant('frozen_at'),
		frozenBy: uuid('frozen_by').references(() => person.id),
		/** Why it was frozen, in the words of who froze it. */
		reason: text('reason').notNull().default(''),
		createdAt: instant('created_at').notNull().defaultNow()
	},
	(table) => [uniqueIndex('protocol_version_number').on(table.studyId, table.number)]
);

/** What the statistician said of one frozen hash. The latest row counts. */
export const signOff = pgTable('sign_off', {
	id: randomId(),
	studyId: uuid('study_id')
		.notNull()
		.references(() => study.id),
	protocolHash: text('protocol_hash').notNull(),
	verdict: text('verdict', { enum: ['signed', 'sent-back'] }).notNull(),
	comment: text('comment').notNull().default(''),
	assumptions: jsonb('assumptions').$type<Record<string, unknown>>().notNull(),
	personId: uuid('person_id')
		.notNull()
		.references(() => person.id),
	at: instant('at').notNull()
});

/** An approval by an ethics board; it names one frozen hash and expires. */
export const ethicsApproval = pgTable('ethics_approval', {
	id: randomId(),
	studyId: uuid('study_id')
		.notNull()
		.references(() => study.id),
	protocolHash: text('protocol_hash').notNull(),
	board: text('board').notNull(),
	reference: text('reference').notNull(),
	approvedOn: date('approved_on', { mode: 'string' }).notNull(),
	expiresOn: date('expires_on', { mode: 'string' }).notNull(),
	recordedBy: uuid('recorded_by')
		.notNull()
		.references(() => person.id),
	recordedAt: instant('recorded_at').notNull(),
	revokedAt: instant('revoked_at')
});
