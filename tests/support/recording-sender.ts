import { simpleParser } from 'mailparser';
import ICAL from 'ical.js';
import type { MailSender, SendOutcome } from '$lib/server/mail/send-mail';

/** Stands in for a mail server: answers what a test says and keeps every mail it was given. */
export function createRecordingSender() {
	const given: { to: string; mime: Buffer }[] = [];
	const answers: (SendOutcome | 'die')[] = [];
	const sender: MailSender = {
		async send({ envelope, mime }) {
			given.push({ to: envelope.to, mime: Buffer.from(mime) });
			const answer = answers.shift() ?? { state: 'sent' };
			if (answer === 'die') throw new Error('the process died after the mail went out');
			return answer;
		}
	};
	return {
		sender,
		given,
		/** Answers for the next mails, in order; afterwards every mail is sent. */
		answerNext: (...next: (SendOutcome | 'die')[]) => void answers.push(...next),
		read: () => Promise.all(given.map(({ mime }) => readMail(mime))),
		clear: () => void given.splice(0)
	};
}

/** What a mail program and a calendar see of a mail. */
export async function readMail(mime: Buffer) {
	const mail = await simpleParser(mime);
	const file = mail.attachments.find((part) => part.contentType === 'application/ics');
	const calendar = file ? new ICAL.Component(ICAL.parse(file.content.toString())) : null;
	const event = calendar?.getFirstSubcomponent('vevent');
	return {
		subject: mail.subject ?? '',
		text: mail.text ?? '',
		messageId: mail.messageId,
		inReplyTo: mail.inReplyTo,
		method: calendar?.getFirstPropertyValue('method'),
		uid: event?.getFirstPropertyValue('uid'),
		sequence: event?.getFirstPropertyValue('sequence'),
		stamp: String(event?.getFirstPropertyValue('dtstamp')),
		start: String(event?.getFirstPropertyValue('dtstart')),
		answerToken: /\/visit\/([A-Za-z0-9_-]{43})/.exec(mail.text ?? '')?.[1]
	};
}
