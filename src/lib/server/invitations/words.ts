import { wordsEn } from './words-en';

/** Every sentence of a participant's mail. A new language is one more object of this type. */
export interface InvitationWords {
	language: string;
	direction: 'ltr' | 'rtl';
	greeting(name: string): string;
	/** 'Berlin time', for a subject line. */
	zoneTime(city: string): string;
	invitationSubject(when: string): string;
	movedSubject(when: string): string;
	cancelledSubject(when: string): string;
	withdrawnSubject(): string;
	invitationTitle(publicTitle: string): string;
	movedTitle(publicTitle: string): string;
	cancelledTitle(publicTitle: string): string;
	withdrawnTitle(publicTitle: string): string;
	invitationLead(labName: string): string;
	movedLead(): string;
	cancelledLead(): string;
	cancelledNext(): string;
	withdrawnLead(): string;
	withdrawnVisits(): string;
	withdrawnNoVisits(): string;
	withdrawnCalendar(): string;
	withdrawnContact(): string;
	labelWhen(): string;
	labelYourTime(): string;
	labelLabTime(): string;
	labelOldTime(): string;
	labelNewTime(): string;
	labelWasAt(): string;
	labelWhere(): string;
	labelHowToFind(): string;
	labelCall(): string;
	labelWrite(): string;
	labelPrepare(): string;
	labelVisit(number: number): string;
	answerHeading(): string;
	answerText(): string;
	answerLink(): string;
	stopHeading(): string;
	stopText(phone: string): string;
	footer(labName: string, publicTitle: string): string;
	withdrawnFooter(labName: string, publicTitle: string): string;
}

const tables: Record<string, InvitationWords> = { en: wordsEn };

/** The words of a language; of a language without words, English ones, marked as English. */
export function wordsFor(language: string): InvitationWords {
	const base = language.toLowerCase().split('-')[0] ?? '';
	return tables[base] ?? wordsEn;
}
