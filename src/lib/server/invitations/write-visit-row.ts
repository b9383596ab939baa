import type { Transaction } from '$lib/server/db/client';
import { answerLink, outbox } from '$lib/server/db/schema';
import { buildCalendarObject, type CalendarVisit } from '$lib/server/mail/calendar-object';
import { makeLinkToken } from '$lib/server/mail/mail-link';
import { buildMailMessage, domainOf, visitMessageId } from '$lib/server/mail/mail-message';
import { renderMailHtml } from '$lib/server/mail/render-mail-html';
import { renderMailText } from '$lib/server/mail/render-mail-text';
import type { VisitToTell } from './load-visit';
import type { MailSetting } from './mail-setting';
import { sealMail, type ToldVisit } from './sealed-mail';
import { writeVisitMail, type VisitMailText } from './visit-mail';

export interface VisitRow {
	kind: 'invitation' | 'moved' | 'cancelled';
	sequence: number;
	/** What the participant was told last; null when nothing reached them. */
	previous: ToldVisit | null;
	/** Message-ID of the first mail about this visit; null for the first. */
	inReplyTo: string | null;
	stampMs: number;
	dueMs: number;
}

/** Writes one mail about one visit and puts it into the outbox, in the caller's transaction. */
export async function writeVisitRow(
	tx: Transaction,
	setting: MailSetting,
	visit: VisitToTell,
	row: VisitRow
): Promise<void> {
	const { booking, recipient } = visit;
	const answerUrl =
		row.kind === 'cancelled' ? undefined : await makeAnswerUrl(tx, setting, visit, row);
	const mail = await buildVisitMail(setting, visit, row, answerUrl);
	await tx.insert(outbox).values({
		studyId: booking.studyId,
		participantId: booking.participantId,
		bookingId: booking.id,
		kind: row.kind,
		sequence: row.sequence,
		messageId: mail.messageId,
		sealed: await sealMail(setting.keys, recipient.participantId, { ...mail, told: visit.told }),
		dueAt: new Date(row.dueMs),
		createdAt: new Date(row.stampMs)
	});
}

async function makeAnswerUrl(
	tx: Transaction,
	setting: MailSetting,
	{ booking, told }: VisitToTell,
	row: VisitRow
): Promise<string> {
	const { token, tokenHash } = makeLinkToken();
	await tx.insert(answerLink).values({
		tokenHash,
		bookingId: booking.id,
		sequence: row.sequence,
		createdAt: new Date(row.stampMs),
		expiresAt: new Date(told.endMs)
	});
	return new URL(`/visit/${token}`, setting.origin).href;
}

async function buildVisitMail(
	setting: MailSetting,
	visit: VisitToTell,
	row: VisitRow,
	answerUrl: string | undefined
) {
	const { booking, recipient } = visit;
	const domain = domainOf(setting.fromAddress);
	const text = writeVisitMail(visitFacts(visit, row, answerUrl));
	const object = calendarVisit(setting, { visit, row, text: text.event, answerUrl });
	return buildMailMessage({
		from: { name: recipient.lab.name, email: setting.fromAddress },
		to: { name: recipient.name, email: recipient.email },
		messageId: visitMessageId(booking.id, row.sequence, row.kind, domain),
		...(row.inReplyTo ? { inReplyTo: row.inReplyTo } : {}),
		sentAtMs: row.dueMs,
		subject: text.subject,
		text: renderMailText(text.content),
		html: renderMailHtml(text.content),
		language: text.content.language,
		calendar: { method: object.method, content: buildCalendarObject(object) }
	});
}

function visitFacts(visit: VisitToTell, row: VisitRow, answerUrl: string | undefined) {
	const { recipient, told, room } = visit;
	const previous = row.kind === 'moved' ? row.previous : null;
	const isMoved = previous && (previous.startMs !== told.startMs || previous.endMs !== told.endMs);
	const isElsewhere = previous && previous.place !== told.place;
	return {
		kind: row.kind === 'moved' && !isMoved ? ('elsewhere' as const) : row.kind,
		language: recipient.language,
		publicTitle: recipient.publicTitle,
		time: timeToTell(visit, row),
		oldTime: isMoved ? previous : undefined,
		oldPlace: isElsewhere ? previous.place : undefined,
		participant: { name: recipient.name, zone: recipient.zone },
		lab: recipient.lab,
		room,
		answerUrl
	};
}

/** A cancellation names the time the participant knows, every other mail the present one. */
function timeToTell({ told }: VisitToTell, row: VisitRow): ToldVisit {
	return row.kind === 'cancelled' && row.previous ? row.previous : told;
}

function calendarVisit(
	setting: MailSetting,
	{
		visit,
		row,
		text,
		answerUrl
	}: {
		visit: VisitToTell;
		row: VisitRow;
		text: VisitMailText['event'];
		answerUrl: string | undefined;
	}
): CalendarVisit {
	const { booking, recipient } = visit;
	const time = timeToTell(visit, row);
	return {
		method: row.kind === 'cancelled' ? 'CANCEL' : 'REQUEST',
		uid: `${booking.id}@${domainOf(setting.fromAddress)}`,
		sequence: row.sequence,
		stampMs: row.stampMs,
		startMs: time.startMs,
		endMs: time.endMs,
		zone: recipient.lab.zone,
		...text,
		...(answerUrl ? { url: answerUrl } : {}),
		organizer: { name: recipient.lab.name, email: setting.fromAddress },
		attendee: { name: recipient.name, email: recipient.email, answer: 'NEEDS-ACTION' },
		reminderMinutes: [24 * 60]
	};
}
