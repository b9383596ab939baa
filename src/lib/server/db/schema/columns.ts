import { customType, timestamp, uuid } from 'drizzle-orm/pg-core';

/** Random primary key (UUID v4): addresses never tell order or number. */
export const randomId = () => uuid('id').primaryKey().defaultRandom();

/** An instant, stored in UTC and read as a Date. */
export const instant = (name: string) => timestamp(name, { withTimezone: true, mode: 'date' });

export const bytes = customType<{ data: Uint8Array; driverData: Buffer | string }>({
	dataType: () => 'bytea',
	toDriver: (value) => Buffer.from(value),
	fromDriver: (value) =>
		typeof value === 'string'
			? Buffer.from(value.replace(/^\\x/, ''), 'hex')
			: new Uint8Array(value)
});

/** A half-open interval of instants. */
export type InstantRange = { startsAt: Date; endsAt: Date };

/** `tstzrange`, written and read as a half-open interval `[startsAt, endsAt)`. */
export const instantRange = customType<{ data: InstantRange; driverData: string }>({
	dataType: () => 'tstzrange',
	toDriver: ({ startsAt, endsAt }) => `[${startsAt.toISOString()},${endsAt.toISOString()})`,
	fromDriver: (text) => {
		const [starts, ends] = text.slice(1, -1).split(',');
		if (!starts || !ends) throw new RangeError(`unbounded range ${text}`);
		return { startsAt: parseInstant(starts), endsAt: parseInstant(ends) };
	}
});

function parseInstant(text: string): Date {
	const iso = text
		.replaceAll('"', '')
		.replace(' ', 'T')
		.replace(/([+-]\d\d)$/, '$1:00');
	return new Date(iso);
}
