import type { VisitMailFacts } from '$lib/server/invitations/visit-mail';

/** A visit at 15:00 in Berlin for somebody in New York (method sheet on calendars, case T12). */
export function visitMailFacts(change: Partial<VisitMailFacts> = {}): VisitMailFacts {
	const startMs = Date.parse('2027-03-15T14:00Z');
	return {
		kind: 'invitation',
		language: 'en',
		publicTitle: 'Practising a sliding movement',
		time: { startMs, endMs: startMs + 75 * 60_000 },
		participant: { name: 'Anna Beck', zone: 'America/New_York' },
		lab: {
			name: 'Tidewater Movement Lab',
			zone: 'Europe/Berlin',
			address: 'Quay House, Hafenweg 2',
			phone: '+49 30 000000',
			email: 'lab@ovalry.example'
		},
		room: { name: 'Room 2.14', directions: 'Second floor, ring at the glass door.' },
		preparation: 'Wear flat shoes.',
		answerUrl: 'https://ovalry.example/visit/AbC',
		...change
	};
}
