/** The words of a mail, once, from which its plain text and its HTML are both written. */
export interface MailContent {
	/** BCP 47 tag of the language it is written in. */
	language: string;
	direction: 'ltr' | 'rtl';
	/** The heading; also the document's title. */
	title: string;
	blocks: MailBlock[];
	/** Who sent it and why, last of all. */
	footer: string;
}

export type MailBlock =
	| { kind: 'paragraph'; text: string }
	| { kind: 'heading'; text: string }
	/** Pairs of what and which: time, place, whom to call. */
	| { kind: 'facts'; rows: MailFact[] }
	/** `text` makes sense by itself, not "click here". */
	| { kind: 'link'; text: string; url: string };

export interface MailFact {
	label: string;
	value: string;
}
