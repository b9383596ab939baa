import { index, integer, jsonb, pgTable, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { person } from './account';
import { bytes, instant, randomId } from './columns';
import { protocolVersion, study } from './study';

export const participantStates = [
	'lead',
	'screened',
	'consented',
	'baseline-done',
	'allocated',
	'completed',
	'withdrawn'
] as const;
export type ParticipantState = (typeof participantStates)[number];

/** Weekly windows in the participant's own zone. Weekday 1 is Monday. */
export type AvailabilityWindow = { weekday: number; fromMinute: number; toMinute: number };

/** A participant by code. Who they are stands in `contact` only. */
export const participant = pgTable(
	'participant',
	{
		id: randomId(),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		protocolVersionId: uuid('protocol_version_id')
			.notNull()
			.references(() => protocolVersion.id),
		/** Serial number in the study; the code is prefix and number, such as TW-017. */
		number: integer('number').notNull(),
		code: text('code').notNull(),
		state: text('state', { enum: participantStates }).notNull(),
		zone: text('zone').notNull(),
		language: text('language').notNull().default('en'),
		availability: jsonb('availability').$type<AvailabilityWindow[]>().notNull().default([]),
		/** Given to everybody after allocation, drawn alike in every arm; null before. */
		earliestStartAt: instant('earliest_start_at'),
		enrolledAt: instant('enrolled_at').notNull(),
		consentedAt: instant('consented_at'),
		baselinePassedAt: instant('baseline_passed_at'),
		allocatedAt: instant('allocated_at'),
		completedAt: instant('completed_at'),
		withdrawnAt: instant('withdrawn_at'),
		withdrawnBy: uuid('withdrawn_by').references(() => person.id)
	},
	(table) => [
		uniqueIndex('participant_code').on(table.studyId, table.code),
		uniqueIndex('participant_number').on(table.studyId, table.number)
	]
);

/** Contact data, encrypted with the participant's own key; erased by destroying that key. */
export const contact = pgTable(
	'contact',
	{
		participantId: uuid('participant_id')
			.primaryKey()
			.references(() => participant.id),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		/** Encrypted JSON {name, email, phone}. */
		sealed: bytes('sealed').notNull(),
		/** HMAC of the normalised e-mail address, to find the same person twice. */
		emailIndex: bytes('email_index').notNull(),
		updatedAt: instant('updated_at').notNull()
	},
	(table) => [uniqueIndex('contact_email').on(table.studyId, table.emailIndex)]
);

/** A consent record: which version of the text, when, and who saw it signed. */
export const consent = pgTable(
	'consent',
	{
		id: randomId(),
		participantId: uuid('participant_id')
			.notNull()
			.references(() => participant.id),
		textVersion: text('text_version').notNull(),
		signedAt: instant('signed_at').notNull(),
		recordedBy: uuid('recorded_by')
			.notNull()
			.references(() => person.id),
		recordedAt: instant('recorded_at').notNull()
	},
	(table) => [index('consent_participant').on(table.participantId)]
);
