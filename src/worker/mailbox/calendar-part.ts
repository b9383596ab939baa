import ICAL from 'ical.js';

/** One event of a mail's calendar part, decoded for the reader and for tests. */
export type CalendarEvent = {
	uid: string;
	sequence: number;
	status: string | null;
	summary: string;
	location: string | null;
	description: string | null;
	start: string;
	end: string | null;
	organizer: string | null;
	attendees: { address: string; answer: string | null }[];
};

export type CalendarPart = { method: string | null; events: CalendarEvent[]; source: string };

/**
 * Reads a calendar part; null if it is no readable calendar, which the page then says.
 *
 * @param source the part's text, as received
 */
export function readCalendarPart(source: string): CalendarPart | null {
	try {
		const calendar = new ICAL.Component(ICAL.parse(source));
		const method = calendar.getFirstPropertyValue('method');
		const events = calendar.getAllSubcomponents('vevent').map(readEvent);
		return { method: method === null ? null : String(method), events, source };
	} catch {
		return null;
	}
}

function readEvent(component: ICAL.Component): CalendarEvent {
	const text = (name: string) => {
		const value = component.getFirstPropertyValue(name);
		return value === null ? null : String(value);
	};
	return {
		uid: text('uid') ?? '',
		sequence: Number(text('sequence') ?? 0),
		status: text('status'),
		summary: text('summary') ?? '',
		location: text('location'),
		description: text('description'),
		start: readTime(component, 'dtstart') ?? '',
		end: readTime(component, 'dtend'),
		organizer: stripScheme(text('organizer')),
		attendees: component.getAllProperties('attendee').map((property) => ({
			address: stripScheme(String(property.getFirstValue())) ?? '',
			answer: property.getFirstParameter('partstat') || null
		}))
	};
}

/** ISO 8601; with Z where the calendar gives UTC, with the zone's name behind it where it gives one. */
function readTime(component: ICAL.Component, name: string): string | null {
	const property = component.getFirstProperty(name);
	if (!property) return null;
	const zone = property.getFirstParameter('tzid');
	const value = String(property.getFirstValue());
	return zone ? `${value} ${zone}` : value;
}

function stripScheme(address: string | null): string | null {
	return address?.replace(/^mailto:/i, '') ?? null;
}
