import { mkdtemp, readdir, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { openMailStore } from './mail-store';

let folder: string;
beforeEach(async () => (folder = await mkdtemp(join(tmpdir(), 'ovalry-mails-'))));
afterEach(() => rm(folder, { recursive: true, force: true }));

const invitation = [
	'From: Tidewater Movement Lab <lab@tidewater.example>',
	'To: Person Seven <seven@people.example>',
	'Subject: =?utf-8?Q?Your_visit_=E2=80=93_Tuesday?=',
	'Date: Tue, 02 Mar 2027 09:00:00 +0100',
	'MIME-Version: 1.0',
	'Content-Type: multipart/alternative; boundary=b',
	'',
	'--b',
	'Content-Type: text/plain; charset=utf-8',
	'',
	'Answer: http://localhost:3000/answer/abc',
	'--b',
	'Content-Type: text/calendar; method=REQUEST; charset=utf-8',
	'',
	'BEGIN:VCALENDAR',
	'VERSION:2.0',
	'PRODID:-//Ovalry//EN',
	'METHOD:REQUEST',
	'BEGIN:VEVENT',
	'UID:visit-7@ovalry.example',
	'SEQUENCE:3',
	'DTSTAMP:20270301T090000Z',
	'DTSTART:20270302T130000Z',
	'DTEND:20270302T140000Z',
	'SUMMARY:Practising a sliding movement',
	'ATTENDEE;PARTSTAT=NEEDS-ACTION:mailto:seven@people.example',
	'END:VEVENT',
	'END:VCALENDAR',
	'--b--',
	''
].join('\r\n');

const envelope = { from: 'lab@tidewater.example', to: ['seven@people.example'] };

describe('the mailbox store', () => {
	it('keeps the received bytes as they came', async () => {
		const store = await openMailStore(folder);
		const { id } = await store.add(Buffer.from(invitation), envelope);
		expect((await store.readSource(id)).toString()).toBe(invitation);
	});

	it('reads subject, text and the calendar part out of a mail', async () => {
		const store = await openMailStore(folder);
		const mail = await store.add(Buffer.from(invitation), envelope);
		expect(mail.subject).toBe('Your visit – Tuesday');
		expect(mail.sentAt).toBe('2027-03-02T08:00:00.000Z');
		expect(mail.text).toContain('http://localhost:3000/answer/abc');
		expect(mail.calendar).toMatchObject({ method: 'REQUEST' });
		expect(mail.calendar?.events).toEqual([
			expect.objectContaining({
				uid: 'visit-7@ovalry.example',
				sequence: 3,
				start: '2027-03-02T13:00:00Z',
				end: '2027-03-02T14:00:00Z',
				attendees: [{ address: 'seven@people.example', answer: 'NEEDS-ACTION' }]
			})
		]);
	});

	it('finds its mails again when opened anew, newest first', async () => {
		const first = await openMailStore(folder);
		await first.add(Buffer.from('Subject: one\r\n\r\n1'), envelope);
		await first.add(Buffer.from('Subject: two\r\n\r\n2'), envelope);
		const again = await openMailStore(folder);
		expect(again.list().map(({ subject }) => subject)).toEqual(['two', 'one']);
	});

	it('lists mails to one address by its envelope, whatever the header says', async () => {
		const store = await openMailStore(folder);
		await store.add(
			Buffer.from('To: somebody@else.example\r\nSubject: hidden copy\r\n\r\n'),
			envelope
		);
		await store.add(Buffer.from('Subject: other\r\n\r\n'), {
			...envelope,
			to: ['x@people.example']
		});
		expect(store.list('SEVEN@people.example').map(({ subject }) => subject)).toEqual([
			'hidden copy'
		]);
	});

	it('leaves no half-written file behind', async () => {
		const store = await openMailStore(folder);
		await store.add(Buffer.from(invitation), envelope);
		expect((await readdir(folder)).filter((name) => name.endsWith('.part'))).toEqual([]);
	});

	it('says that a calendar part cannot be read instead of failing', async () => {
		const store = await openMailStore(folder);
		const broken = invitation.replace('BEGIN:VEVENT', 'BEGIN');
		expect((await store.add(Buffer.from(broken), envelope)).calendar).toBeNull();
	});
});
