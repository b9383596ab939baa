import type { MailBlock, MailContent, MailFact } from '$lib/server/mail/mail-content';
import { subjectTime, visitTimeText, type VisitTime } from './visit-time';
import { wordsFor, type InvitationWords, type VisitMailKind } from './words';

export type { VisitMailKind };

/** What a mail about one visit tells. Nothing here knows the study's design. */
export interface VisitMailFacts {
	kind: VisitMailKind;
	language: string;
	publicTitle: string;
	time: VisitTime;
	/** When it was before; given when the time changed. */
	oldTime?: VisitTime | undefined;
	/** Where it took place before; given when the place changed. */
	oldPlace?: string | undefined;
	participant: { name: string; zone: string };
	lab: { name: string; zone: string; address: string; phone: string; email: string };
	room: { name: string; directions: string };
	/** What to bring, wear or leave out; empty for nothing. */
	preparation?: string | undefined;
	/** Page to answer on; absent in a cancellation. */
	answerUrl?: string | undefined;
}

export interface VisitMailText {
	subject: string;
	content: MailContent;
	/** Title, place and text of the calendar's event. */
	event: { summary: string; location: string; description: string };
}

/** The words of a mail about one visit, and of its event in the calendar. */
export function writeVisitMail(facts: VisitMailFacts): VisitMailText {
	const words = wordsFor(facts.language);
	const { kind, time, publicTitle, participant, lab } = facts;
	return {
		subject: words.subject[kind](subjectTime(time.startMs, participant.zone, words)),
		content: {
			language: words.language,
			direction: words.direction,
			title: words.title[kind](publicTitle),
			blocks: [
				{ kind: 'paragraph', text: words.greeting(participant.name) },
				{ kind: 'paragraph', text: words.lead[kind](lab.name) },
				...bodyOf(facts, words)
			],
			footer: words.footer(lab.name, publicTitle)
		},
		event: {
			summary: publicTitle,
			location: placeOf(facts),
			description: descriptionOf(facts, words)
		}
	};
}

function bodyOf(facts: VisitMailFacts, words: InvitationWords): MailBlock[] {
	const contact = contactRows(facts, words);
	if (facts.kind === 'cancelled') {
		return [
			{ kind: 'facts', rows: [...timeRows(facts, words), ...contact] },
			{ kind: 'paragraph', text: words.cancelledNext() },
			...stopBlocks(facts, words)
		];
	}
	const rows = [...timeRows(facts, words), ...placeRows(facts, words), ...contact];
	return [{ kind: 'facts', rows }, ...answerBlocks(facts, words), ...stopBlocks(facts, words)];
}

/** Old and new time when moved; the participant's clock beside the laboratory's when they differ. */
function timeRows(facts: VisitMailFacts, words: InvitationWords): MailFact[] {
	const { time, oldTime, participant, lab, kind } = facts;
	const inZone = (at: VisitTime, zone: string) => visitTimeText(at, zone, words.language);
	const old: MailFact[] = oldTime
		? [{ label: words.labelOldTime(), value: inZone(oldTime, participant.zone) }]
		: [];
	const main = kind === 'cancelled' ? words.labelWasAt() : oldTime ? words.labelNewTime() : '';
	if (participant.zone === lab.zone) {
		return [...old, { label: main || words.labelWhen(), value: inZone(time, lab.zone) }];
	}
	return [
		...old,
		{ label: main || words.labelYourTime(), value: inZone(time, participant.zone) },
		{ label: words.labelLabTime(), value: inZone(time, lab.zone) }
	];
}

function placeRows(facts: VisitMailFacts, words: InvitationWords): MailFact[] {
	const { oldPlace } = facts;
	const rows: MailFact[] = [
		{ label: words.labelOldPlace(), value: oldPlace ?? '' },
		{ label: oldPlace ? words.labelNewPlace() : words.labelWhere(), value: placeOf(facts) },
		{ label: words.labelHowToFind(), value: facts.room.directions },
		{ label: words.labelPrepare(), value: facts.preparation ?? '' }
	];
	return rows.filter((row) => row.value.trim() !== '');
}

function contactRows({ lab }: VisitMailFacts, words: InvitationWords): MailFact[] {
	const call = lab.phone === '' ? [] : [{ label: words.labelCall(), value: lab.phone }];
	return [...call, { label: words.labelWrite(), value: lab.email }];
}

function answerBlocks({ answerUrl }: VisitMailFacts, words: InvitationWords): MailBlock[] {
	if (!answerUrl) return [];
	return [
		{ kind: 'heading', text: words.answerHeading() },
		{ kind: 'paragraph', text: words.answerText() },
		{ kind: 'link', text: words.answerLink(), url: answerUrl }
	];
}

function stopBlocks({ lab }: VisitMailFacts, words: InvitationWords): MailBlock[] {
	return [
		{ kind: 'heading', text: words.stopHeading() },
		{ kind: 'paragraph', text: words.stopText(lab.phone) }
	];
}

/** Room, laboratory and address in one line. */
export function placeOf({
	lab,
	room
}: {
	lab: { name: string; address: string };
	room: { name: string };
}): string {
	return [room.name, lab.name, lab.address].filter((part) => part.trim() !== '').join(', ');
}

function descriptionOf(facts: VisitMailFacts, words: InvitationWords): string {
	const rows = [
		...timeRows({ ...facts, oldTime: undefined }, words),
		...placeRows({ ...facts, oldPlace: undefined }, words).slice(1),
		...contactRows(facts, words)
	];
	const text = rows.map((row) => `${row.label}: ${row.value}`).join('\n');
	return `${text}\n\n${words.stopText(facts.lab.phone)}`;
}
