import { boolean, index, integer, pgTable, text, uuid } from 'drizzle-orm/pg-core';
import { bytes, instant, instantRange, randomId } from './columns';
import { rig, room, staff } from './lab';
import { participant } from './participant';
import { study } from './study';

export const bookingStates = ['booked', 'attended', 'no-show', 'cancelled'] as const;
export type BookingState = (typeof bookingStates)[number];
export const answers = ['none', 'accepted', 'declined', 'asks-other-time'] as const;
export type Answer = (typeof answers)[number];

/**
 * One visit of one participant at one place in time. Exclusion constraints (see migrations) refuse
 * two live bookings of a rig, room or staff member over `occupied`, or of a person over `during`.
 */
export const booking = pgTable(
	'booking',
	{
		id: randomId(),
		studyId: uuid('study_id')
			.notNull()
			.references(() => study.id),
		participantId: uuid('participant_id')
			.notNull()
			.references(() => participant.id),
		visitNumber: integer('visit_number').notNull(),
		rigId: uuid('rig_id')
			.notNull()
			.references(() => rig.id),
		roomId: uuid('room_id')
			.notNull()
			.references(() => room.id),
		staffId: uuid('staff_id')
			.notNull()
			.references(() => staff.id),
		/** The visit itself. */
		during: instantRange('during').notNull(),
		/** The visit with set-up and clean-up. */
		occupied: instantRange('occupied').notNull(),
		state: text('state', { enum: bookingStates }).notNull().default('booked'),
		/** iCalendar SEQUENCE of the latest message about this visit. */
		sequence: integer('sequence').notNull().default(0),
		/** Set when the invitation's sending was ordered; earlier moves send nothing. */
		invitedAt: instant('invited_at'),
		answer: text('answer', { enum: answers }).notNull().default('none'),
		answeredAt: instant('answered_at'),
		/** The participant's words, encrypted with their key. */
		answerNote: bytes('answer_note'),
		/** A request (declined, other time) that the coordinator has dealt with. */
		requestSettledAt: instant('request_settled_at'),
		createdAt: instant('created_at').notNull(),
		changedAt: instant('changed_at').notNull()
	},
	(table) => [
		index('booking_participant').on(table.participantId),
		index('booking_study').on(table.studyId)
	]
);

/** A link in a mail by which a participant sees and answers one visit; only its hash is kept. */
export const answerLink = pgTable('answer_link', {
	tokenHash: bytes('token_hash').primaryKey(),
	bookingId: uuid('booking_id')
		.notNull()
		.references(() => booking.id),
	/** The SEQUENCE the link was mailed with; an older one cannot answer for a moved visit. */
	sequence: integer('sequence').notNull(),
	createdAt: instant('created_at').notNull(),
	expiresAt: instant('expires_at').notNull()
});

/** A mail to be sent, kept as the very bytes that go out, under the participant's key. */
export const outbox = pgTable(
	'outbox',
	{
		id: randomId(),
		studyId: uuid('study_id').references(() => study.id),
		participantId: uuid('participant_id').references(() => participant.id),
		bookingId: uuid('booking_id').references(() => booking.id),
		kind: text('kind', { enum: ['invitation', 'moved', 'cancelled', 'withdrawn'] }).notNull(),
		sequence: integer('sequence').notNull(),
		messageId: text('message_id').notNull(),
		/** Sealed JSON {envelope, mime} under the participant's key. */
		sealed: bytes('sealed').notNull(),
		state: text('state', { enum: ['waiting', 'sent', 'superseded', 'failed', 'unknown'] })
			.notNull()
			.default('waiting'),
		dueAt: instant('due_at').notNull(),
		attempts: integer('attempts').notNull().default(0),
		leaseUntil: instant('lease_until'),
		lastError: text('last_error'),
		isUrgent: boolean('is_urgent').notNull().default(false),
		createdAt: instant('created_at').notNull(),
		sentAt: instant('sent_at')
	},
	(table) => [index('outbox_due').on(table.state, table.dueAt)]
);
