/** What became of a booking, in words. */
export const stateWords = {
	booked: 'booked',
	attended: 'came',
	'no-show': 'did not come',
	cancelled: 'cancelled'
} as const;

type Answered = {
	answer: 'none' | 'accepted' | 'declined' | 'asks-other-time';
	invitedAtMs: number | null;
};

/** What the person said to the invitation. */
export function answerWords({ answer, invitedAtMs }: Answered): string {
	if (answer === 'accepted') return 'accepted';
	if (answer === 'declined') return 'declined';
	if (answer === 'asks-other-time') return 'asks for another time';
	return invitedAtMs === null ? 'booked, not invited yet' : 'invited, no answer yet';
}
