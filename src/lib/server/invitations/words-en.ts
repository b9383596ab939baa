import type { InvitationWords } from './words';

export const wordsEn: InvitationWords = {
	language: 'en',
	direction: 'ltr',
	greeting: (name) => `Hello ${name},`,
	zoneTime: (city) => `${city} time`,
	invitationSubject: (when) => `Your visit: ${when}`,
	movedSubject: (when) => `Visit moved: ${when}`,
	cancelledSubject: (when) => `Visit cancelled: ${when}`,
	withdrawnSubject: () => 'You have stopped taking part',
	invitationTitle: (publicTitle) => `Your visit for “${publicTitle}”`,
	movedTitle: (publicTitle) => `Your visit for “${publicTitle}” has a new time`,
	cancelledTitle: (publicTitle) => `Your visit for “${publicTitle}” is cancelled`,
	withdrawnTitle: (publicTitle) => `You have stopped taking part in “${publicTitle}”`,
	invitationLead: (labName) => `${labName} has booked this visit for you.`,
	movedLead: () =>
		'This visit takes place at another time. The new time replaces the old one in your calendar once you open this message there.',
	cancelledLead: () =>
		'This visit does not take place, you need not do anything. It disappears from your calendar once you open this message there.',
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
