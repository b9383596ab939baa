import { createHash } from 'node:crypto';
import MailComposer from 'nodemailer/lib/mail-composer';
import type Mail from 'nodemailer/lib/mailer';
import { checkedAddress, cleanLine } from './clean-text';

export interface MailParty {
	name: string;
	email: string;
}

export interface MailMessage {
	from: MailParty;
	to: MailParty;
	/** `<id@domain>`, chosen by the sender so that a repeated send is the same message. */
	messageId: string;
	/** Message-ID of the first mail about the same thing. */
	inReplyTo?: string;
	sentAtMs: number;
	subject: string;
	text: string;
	html: string;
	/** BCP 47 tag of the words in it. */
	language: string;
	calendar?: { method: 'REQUEST' | 'CANCEL'; content: string };
}

export interface BuiltMail {
	messageId: string;
	envelope: { from: string; to: string };
	/** The message as it goes over the wire, byte for byte. */
	mime: Uint8Array;
}

/** The one file name a calendar attachment has: it tells nothing. */
export const CALENDAR_FILE_NAME = 'invite.ics';

/**
 * Builds the bytes of one mail to one person: text, HTML and, where there is a visit, its calendar
 * object as an alternative and as a file.
 *
 * The same input gives the same bytes, so that a mail whose fate is unknown can be sent again.
 * Source: RFC 5322, 6047; method sheet on calendars and mail, checklists C and E.
 * @throws TypeError when an address cannot be written to.
 */
export async function buildMailMessage(message: MailMessage): Promise<BuiltMail> {
	const node = new MailComposer(composed(message)).compile();
	const mime = await node.build();
	return {
		messageId: message.messageId,
		envelope: { from: message.from.email, to: message.to.email },
		mime: new Uint8Array(mime)
	};
}

/** `<bookingId.v2.invitation@domain>` */
export function visitMessageId(
	bookingId: string,
	sequence: number,
	kind: string,
	domain: string
): string {
	return `<${bookingId}.v${sequence}.${kind}@${domain}>`;
}

/** The part of an address after the @, lower case. */
export function domainOf(address: string): string {
	return checkedAddress(address)
		.slice(address.lastIndexOf('@') + 1)
		.toLowerCase();
}

function composed(message: MailMessage): Mail.Options & { baseBoundary: string } {
	const { calendar } = message;
	return {
		from: party(message.from),
		to: party(message.to),
		messageId: message.messageId,
		date: new Date(message.sentAtMs),
		subject: cleanLine(message.subject),
		text: wireLines(message.text),
		html: wireLines(message.html),
		...(message.inReplyTo ? { inReplyTo: message.inReplyTo, references: [message.inReplyTo] } : {}),
		headers: {
			'Auto-Submitted': 'auto-generated',
			'X-Auto-Response-Suppress': 'OOF, AutoReply',
			'Content-Language': message.language
		},
		...(calendar ? { icalEvent: calendarPart(calendar) } : {}),
		baseBoundary: createHash('sha256').update(message.messageId).digest('hex').slice(0, 24),
		disableFileAccess: true,
		disableUrlAccess: true
	};
}

function calendarPart(calendar: { method: 'REQUEST' | 'CANCEL'; content: string }) {
	return {
		method: calendar.method,
		content: calendar.content,
		filename: CALENDAR_FILE_NAME,
		contentTransferEncoding: 'base64'
	};
}

/** Line ends as they go over the wire, so that stored and sent bytes are the same. */
function wireLines(text: string): string {
	return text.replace(/\r?\n/g, '\r\n');
}

function party({ name, email }: MailParty): Mail.Address {
	return { name: cleanLine(name), address: checkedAddress(email) };
}
