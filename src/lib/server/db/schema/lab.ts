import {
	boolean,
	date,
	index,
	integer,
	jsonb,
	pgTable,
	text,
	uniqueIndex,
	uuid
} from 'drizzle-orm/pg-core';
import { person } from './account';
import { instant, randomId } from './columns';

export const lab = pgTable('lab', {
	id: randomId(),
	name: text('name').notNull(),
	zone: text('zone').notNull(),
	address: text('address').notNull().default(''),
	phone: text('phone').notNull().default(''),
	email: text('email').notNull().default(''),
	createdAt: instant('created_at').notNull().defaultNow()
});

/** A person belongs to a lab from `since` until `endedAt`; the row is kept when they leave. */
export const membership = pgTable(
	'membership',
	{
		id: randomId(),
		labId: uuid('lab_id')
			.notNull()
			.references(() => lab.id),
		personId: uuid('person_id')
			.notNull()
			.references(() => person.id),
		isSteward: boolean('is_steward').notNull().default(false),
		invitedBy: uuid('invited_by').references(() => person.id),
		since: instant('since').notNull().defaultNow(),
		acceptedAt: instant('accepted_at'),
		endedAt: instant('ended_at')
	},
	(table) => [uniqueIndex('membership_person').on(table.labId, table.personId)]
);

export const room = pgTable('room', {
	id: randomId(),
	labId: uuid('lab_id')
		.notNull()
		.references(() => lab.id),
	name: text('name').notNull(),
	directions: text('directions').notNull().default('')
});

/** Limits set and checked on the rig by qualified staff; Ovalry refuses what would exceed them. */
export type RigLimits = {
	isPowered: boolean;
	minutesPerVisit: number;
	trialsPerVisit: number;
	/** Largest values an execution variable may be asked for, by variable name. */
	variableMax: Record<string, number>;
	/** Largest distance by which a target may be moved, in the unit of the task's result. */
	shiftMax?: number;
	/** Largest share of a person's own trials that a penalized region may catch. */
	penaltyShareMax?: number;
};

export const rig = pgTable('rig', {
	id: randomId(),
	labId: uuid('lab_id')
		.notNull()
		.references(() => lab.id),
	roomId: uuid('room_id')
		.notNull()
		.references(() => room.id),
	name: text('name').notNull(),
	limits: jsonb('limits').$type<RigLimits>().notNull(),
	/** Public encryption key of the rig (JSON Web Key); the private half stays on the rig. */
	publicKey: jsonb('public_key').$type<Record<string, unknown>>(),
	retiredAt: instant('retired_at')
});

/** Somebody who can run visits, with weekly hours of their own. */
export const staff = pgTable('staff', {
	id: randomId(),
	labId: uuid('lab_id')
		.notNull()
		.references(() => lab.id),
	personId: uuid('person_id').references(() => person.id),
	name: text('name').notNull(),
	endedAt: instant('ended_at')
});

/** Weekly hours in the lab's zone, of one rig or of one staff member. Weekday 1 is Monday. */
export const weeklyHours = pgTable(
	'weekly_hours',
	{
		id: randomId(),
		labId: uuid('lab_id')
			.notNull()
			.references(() => lab.id),
		rigId: uuid('rig_id').references(() => rig.id),
		staffId: uuid('staff_id').references(() => staff.id),
		weekday: integer('weekday').notNull(),
		opensMinute: integer('opens_minute').notNull(),
		closesMinute: integer('closes_minute').notNull()
	},
	(table) => [index('weekly_hours_lab').on(table.labId)]
);

/** A day on which the whole lab is closed. */
export const holiday = pgTable(
	'holiday',
	{
		id: randomId(),
		labId: uuid('lab_id')
			.notNull()
			.references(() => lab.id),
		on: date('on', { mode: 'string' }).notNull(),
		name: text('name').notNull()
	},
	(table) => [uniqueIndex('holiday_day').on(table.labId, table.on)]
);
