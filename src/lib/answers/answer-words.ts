/** How a participant's answer reads on their page. */
export const answerOptions = [
	{ value: 'accepted', label: 'I come', detail: 'Nothing more to do.' },
	{
		value: 'asks-other-time',
		label: 'I ask for another time',
		detail: 'Write below when you could come. This visit stays booked until you hear from us.'
	},
	{
		value: 'declined',
		label: 'I cannot come',
		detail: 'We call or write to find out how to go on.'
	}
] as const;

export const givenAnswer = {
	accepted: 'You said that you come.',
	declined: 'You said that you cannot come.',
	'asks-other-time': 'You asked for another time.'
} as const;
