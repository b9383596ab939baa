import type { SaveRefusal } from './save-plan';

/** Why something was not saved, for the page: a heading, and sentences that say how to mend it. */
export type ToldRefusal = { title: string; text: string; sentences: string[] };

const plain = {
	'not-found': [
		'Not in this study',
		'This person or visit is not in this study. Load the page again.'
	],
	'no-consent': ['Consent first', 'Record their consent; then visits can be booked.'],
	withdrawn: ['Withdrawn', 'This person has withdrawn; nothing can be booked for them.'],
	stale: [
		'The plan has changed',
		'Somebody changed bookings of this study since these places were worked out. Here they are anew; choose again.'
	],
	over: ['Already over', 'A visit that is over, or has begun, is not moved.'],
	nothing: ['Nothing chosen', 'Choose a place first.']
} as const;

/** The words for a refusal, with each broken rule by its name. */
export function explainRefusal(refusal: SaveRefusal): ToldRefusal {
	if (refusal.reason === 'breaks-rules') {
		const sentences = refusal.broken.map(({ sentence }) => sentence);
		return { title: 'A rule would break', text: sentences[0] ?? '', sentences };
	}
	if (refusal.reason === 'taken') {
		const { sentence } = refusal.clash;
		return { title: 'Taken a moment ago', text: sentence, sentences: [sentence] };
	}
	if (refusal.reason === 'gates-missing') {
		const sentences = refusal.gates.map(({ text }) => text);
		return { title: 'Booking is shut', text: sentences[0] ?? '', sentences };
	}
	const [title, text] = plain[refusal.reason];
	return { title, text, sentences: [text] };
}
