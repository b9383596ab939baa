import ICAL from 'ical.js';
import { simpleParser } from 'mailparser';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { buildCalendarObject } from './calendar-object';
import { buildMailMessage, domainOf, visitMessageId, type MailMessage } from './mail-message';
import { createMailSender } from './send-mail';
import { startTestMailServer, testDkimKey } from '../../../../tests/support/test-mail-server';

const bookingId = '0c5d6a1e-4f3b-4d53-9c0a-6f2f0f3c9a01';
const lab = { name: 'Bewegungslabor Übersee', email: 'lab@ovalry.example' };
const anna = { name: 'Anna Bäck', email: 'anna@people.example' };
const startMs = Date.parse('2027-03-11T10:30Z');

function calendar(method: 'REQUEST' | 'CANCEL', sequence: number) {
	const content = buildCalendarObject({
		method,
		uid: `${bookingId}@ovalry.example`,
		sequence,
		stampMs: Date.parse('2027-03-01T12:00Z') + sequence * 1000,
		startMs: startMs + sequence * 3_600_000,
		endMs: startMs + sequence * 3_600_000 + 4_500_000,
		zone: 'Europe/Lisbon',
		summary: 'Practising a sliding movement',
		location: 'Room 2.14',
		description: 'Übung',
		organizer: lab,
		attendee: { ...anna, answer: 'NEEDS-ACTION' }
	});
	return { method, content };
}

function message(change: Partial<MailMessage> = {}): MailMessage {
	return {
		from: lab,
		to: anna,
		messageId: visitMessageId(bookingId, 0, 'invitation', 'ovalry.example'),
		sentAtMs: Date.parse('2027-03-01T12:00Z'),
		subject: 'Your visit: Thu 11 März, 10:30 (Lisbon time)',
		text: 'Guten Tag,\n\nwe look forward to your visit.\n',
		html: '<!doctype html><html lang="en"><body><p>Guten Tag</p></body></html>',
		language: 'en',
		...change
	};
}

/** Content types of the parts, outermost first, as a mail program meets them. */
function partsOf(raw: string): string[] {
	return [...raw.matchAll(/^content-type:\s*([a-z]+\/[a-z]+)/gim)].map((match) => match[1] ?? '');
}

describe('mail message (checklist C and E)', () => {
	it('is text, HTML and calendar as alternatives, with the calendar as a file beside', async () => {
		const mail = await buildMailMessage(message({ calendar: calendar('REQUEST', 0) }));
		const raw = Buffer.from(mail.mime).toString();
		expect(partsOf(raw)).toEqual([
			'multipart/mixed',
			'multipart/alternative',
			'text/plain',
			'text/html',
			'text/calendar',
			'application/ics'
		]);
		const part = raw.slice(raw.indexOf('text/calendar'), raw.indexOf('application/ics'));
		expect(part).toMatch(/method=REQUEST/);
		expect(part).toMatch(/charset=utf-8/);
		expect(part.split('\r\n\r\n')[0]).not.toMatch(/Content-Disposition/i);
		expect(part).toMatch(/Content-Transfer-Encoding: base64/);
		expect(raw).toContain('invite.ics');
	});

	it('is the same bytes when built again', async () => {
		const build = () => buildMailMessage(message({ calendar: calendar('REQUEST', 0) }));
		const first = Buffer.from((await build()).mime);
		expect(first.equals((await build()).mime)).toBe(true);
	});

	it('says that a machine sent it, in which language, and holds no list header', async () => {
		const parsed = await simpleParser(Buffer.from((await buildMailMessage(message())).mime));
		expect(parsed.headers.get('auto-submitted')).toBe('auto-generated');
		expect(parsed.headers.get('x-auto-response-suppress')).toBe('OOF, AutoReply');
		expect(parsed.headers.get('content-language')).toBe('en');
		expect(parsed.headers.has('list')).toBe(false);
		expect(parsed.from?.value[0]).toEqual({ name: lab.name, address: lab.email });
		expect(parsed.subject).toBe('Your visit: Thu 11 März, 10:30 (Lisbon time)');
		expect(parsed.messageId).toBe(`<${bookingId}.v0.invitation@ovalry.example>`);
	});

	it('lets no name or subject add a header or a recipient', async () => {
		const evil = 'x\r\nBcc: e@evil.example\r\n\r\nbody';
		const mail = await buildMailMessage(
			message({ subject: evil, from: { ...lab, name: evil }, to: { ...anna, name: evil } })
		);
		const parsed = await simpleParser(Buffer.from(mail.mime));
		expect(parsed.bcc).toBeUndefined();
		expect(parsed.text?.trim()).toContain('Guten Tag');
		const bad = { name: 'A', email: 'a@people.example, e@evil.example' };
		await expect(buildMailMessage(message({ to: bad }))).rejects.toThrow(TypeError);
	});

	it('finds the domain of an address', () => {
		expect(domainOf('Lab@Ovalry.Example')).toBe('ovalry.example');
	});
});

describe('request, move and cancellation over the wire', () => {
	let server: Awaited<ReturnType<typeof startTestMailServer>>;
	beforeAll(async () => {
		server = await startTestMailServer();
		const privateKey = testDkimKey();
		const sender = createMailSender({
			...server.mailServer,
			dkim: { domainName: 'ovalry.example', keySelector: 's1', privateKey }
		});
		for (const [sequence, kind] of ['invitation', 'moved', 'cancelled'].entries()) {
			const method = kind === 'cancelled' ? 'CANCEL' : 'REQUEST';
			const first = visitMessageId(bookingId, 0, 'invitation', 'ovalry.example');
			const mail = await buildMailMessage(
				message({
					calendar: calendar(method, sequence),
					messageId: visitMessageId(bookingId, sequence, kind, 'ovalry.example'),
					...(sequence > 0 ? { inReplyTo: first } : {})
				})
			);
			expect(await sender.send(mail)).toEqual({ state: 'sent' });
		}
	});
	afterAll(() => server.close());

	it('arrive as one event with the same UID, rising SEQUENCE and matching methods', async () => {
		expect(server.taken).toHaveLength(3);
		for (const [sequence, { raw, from, to }] of server.taken.entries()) {
			const parsed = await simpleParser(raw);
			const file = parsed.attachments.find((part) => part.contentType === 'application/ics');
			const part = parsed.attachments.find((part) => part.contentType === 'text/calendar');
			expect(file?.content.equals(part?.content ?? Buffer.of())).toBe(true);
			const object = new ICAL.Component(ICAL.parse(String(file?.content)));
			const event = object.getFirstSubcomponent('vevent');
			const method = sequence === 2 ? 'CANCEL' : 'REQUEST';
			expect(object.getFirstPropertyValue('method')).toBe(method);
			expect(raw.toString()).toContain(`method=${method}`);
			expect(event?.getFirstPropertyValue('uid')).toBe(`${bookingId}@ovalry.example`);
			expect(event?.getFirstPropertyValue('sequence')).toBe(sequence);
			expect(event?.getFirstPropertyValue('organizer')).toBe(`mailto:${from}`);
			expect(event?.getFirstPropertyValue('attendee')).toBe(`mailto:${to[0]}`);
			expect(to).toHaveLength(1);
		}
	});

	it('thread under the first mail', async () => {
		const [first, ...later] = await Promise.all(server.taken.map(({ raw }) => simpleParser(raw)));
		expect(first?.inReplyTo).toBeUndefined();
		for (const mail of later) {
			expect(mail.inReplyTo).toBe(first?.messageId);
			expect([mail.references].flat()).toEqual([first?.messageId]);
		}
	});

	it('are signed over every header that matters', async () => {
		const signature = /DKIM-Signature:[\s\S]*?\r\n(?!\s)/i.exec(String(server.taken[1]?.raw))?.[0];
		const headers = /[;\s]h=([\s\S]*?);/
			.exec(signature ?? '')?.[1]
			?.replace(/\s/g, '')
			.split(':');
		expect(headers?.map((name) => name.toLowerCase())).toEqual(
			expect.arrayContaining([
				'from',
				'to',
				'subject',
				'date',
				'message-id',
				'in-reply-to',
				'references',
				'auto-submitted',
				'content-type'
			])
		);
	});
});
