import { sql } from 'drizzle-orm';
import { index, integer, pgTable, primaryKey, text, uniqueIndex, uuid } from 'drizzle-orm/pg-core';
import { instant, randomId } from './columns';

/** A member of the team who can sign in. Participants are not persons in this sense. */
export const person = pgTable(
	'person',
	{
		id: randomId(),
		name: text('name'),
		email: text('email').notNull(),
		emailVerified: instant('email_verified'),
		image: text('image'),
		createdAt: instant('created_at').notNull().defaultNow()
	},
	(table) => [uniqueIndex('person_email').on(sql`lower(${table.email})`)]
);

/** A sign-on at another institution (OpenID Connect) that belongs to a person. */
export const account = pgTable(
	'account',
	{
		userId: uuid('person_id')
			.notNull()
			.references(() => person.id, { onDelete: 'cascade' }),
		type: text('type').notNull(),
		provider: text('provider').notNull(),
		providerAccountId: text('provider_account_id').notNull(),
		refresh_token: text('refresh_token'),
		access_token: text('access_token'),
		expires_at: integer('expires_at'),
		token_type: text('token_type'),
		scope: text('scope'),
		id_token: text('id_token'),
		session_state: text('session_state')
	},
	(table) => [primaryKey({ columns: [table.provider, table.providerAccountId] })]
);

/** A sign-in session of a browser; deleting the row signs that browser out. */
export const session = pgTable(
	'session',
	{
		/** SHA-256 of the token in the browser's cookie, hexadecimal: what is read here opens nothing. */
		sessionToken: text('session_token').primaryKey(),
		userId: uuid('person_id')
			.notNull()
			.references(() => person.id, { onDelete: 'cascade' }),
		expires: instant('expires').notNull(),
		startedAt: instant('started_at').notNull().defaultNow(),
		/** In words, for the list of one's own sessions: "Firefox on Linux". */
		browser: text('browser').notNull().default('')
	},
	(table) => [index('session_person').on(table.userId)]
);

/** A sign-in link that was mailed; the token is stored hashed by Auth.js. */
export const verificationToken = pgTable(
	'verification_token',
	{
		identifier: text('identifier').notNull(),
		token: text('token').notNull(),
		expires: instant('expires').notNull()
	},
	(table) => [primaryKey({ columns: [table.identifier, table.token] })]
);
