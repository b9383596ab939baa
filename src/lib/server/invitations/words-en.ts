import type { InvitationWords } from './words';

export const wordsEn: InvitationWords = {
	language: 'en',
	direction: 'ltr',
	greeting: (name) => `Hello ${name},`,
	zoneTime: (city) => `${city} time`,
	subject: {
		invitation: (when) => `Your visit: ${when}`,
		moved: (when) => `Visit moved: ${when}`,
		elsewhere: (when) => `Visit at another place: ${when}`,
		cancelled: (when) => `Visit cancelled: ${when}`
	},
	title: {
		invitation: (publicTitle) => `Your visit for “${publicTitle}”`,
		moved: (publicTitle) => `Your visit for “${publicTitle}” has a new time`,
		elsewhere: (publicTitle) => `Your visit for “${publicTitle}” is at another place`,
		cancelled: (publicTitle) => `Your visit for “${publicTitle}” is cancelled`
	},
	lead: {
		invitation: (labName) => `${labName} has booked this visit for you.`,
		moved: () =>
			'This visit takes place at another time. The new time replaces the old one in your calendar once you open this message there.',
		elsewhere: () =>
			'The time stays, the place is another. Your calendar takes over the new place once you open this message there.',
		cancelled: () =>
			'This visit does not take place, you need not do anything. It disappears from your calendar once you open this message there.'
	},
	withdrawnSubject: () => 'You have stopped taking part',
	withdrawnTitle: (publicTitle) => `You have stopped taking part in “${publicTitle}”`,
	cancelledNext: () => 'If another visit is booked for you, you get a new message.',
	withdrawnLead: () =>
		'We have noted that you stop taking part. You need not give a reason, and nobody will try to change your mind.',
	withdrawnVisits: () => 'These visits are cancelled:',
	withdrawnNoVisits: () => 'No visit was booked for you any more.',
	withdrawnCalendar: () =>
		'For each of them you also get one short message, so that it disappears from your calendar. After that we send you no more messages about visits.',
	withdrawnContact: () =>
		'If you have questions, also about the data already collected or about pay, please ask:',
	labelWhen: () => 'When',
	labelYourTime: () => 'When, on your clock',
	labelLabTime: () => 'When, on the laboratory’s clock',
	labelOldTime: () => 'Old time',
	labelNewTime: () => 'New time',
	labelWasAt: () => 'It was at',
	labelWhere: () => 'Where',
	labelOldPlace: () => 'Old place',
	labelNewPlace: () => 'New place',
	labelHowToFind: () => 'How to find it',
	labelCall: () => 'Call',
	labelWrite: () => 'Write to',
	labelPrepare: () => 'Before you come',
	labelVisit: (number) => `Visit ${number}`,
	answerHeading: () => 'Can you come?',
	answerText: () =>
		'Open this page to say that you come, that you cannot, or to ask for another time. You need no account.',
	answerLink: () => 'Answer for this visit',
	stopHeading: () => 'If you want to stop',
	stopText: (phone) =>
		`You can stop taking part at any time and need not give a reason. ${phone === '' ? 'Reply to this mail.' : `Call ${phone} or reply to this mail.`}`,
	footer: (labName, publicTitle) =>
		`Sent by ${labName}, because you take part in “${publicTitle}”. Replies to this mail are read by the laboratory.`,
	withdrawnFooter: (labName, publicTitle) =>
		`Sent by ${labName}, because you took part in “${publicTitle}”. Replies to this mail are read by the laboratory.`
};
