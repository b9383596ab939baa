import { wordsEn } from './words-en';

/** `elsewhere`: the time stays, the place is another. */
export type VisitMailKind = 'invitation' | 'moved' | 'elsewhere' | 'cancelled';

/** Every sentence of a participant's mail. A new language is one more object of this type. */
export interface InvitationWords {
	language: string;
	direction: 'ltr' | 'rtl';
	greeting(name: string): string;
	/** 'Berlin time', for a subject line. */
	zoneTime(city: string): string;
	/** By kind of mail; `when` is day, time and zone. */
	subject: Record<VisitMailKind, (when: string) => string>;
	title: Record<VisitMailKind, (publicTitle: string) => string>;
	lead: Record<VisitMailKind, (labName: string) => string>;
	withdrawnSubject(): string;
	withdrawnTitle(publicTitle: string): string;
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
	labelOldPlace(): string;
	labelNewPlace(): string;
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
