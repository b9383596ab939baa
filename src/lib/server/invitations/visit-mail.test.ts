import { describe, expect, it } from 'vitest';
import { findTellingWords } from '$lib/invitations/telling-words';
import { renderMailText } from '$lib/server/mail/render-mail-text';
import { visitMailFacts } from '../../../../tests/support/visit-mail-facts';
import { writeVisitMail, type VisitMailKind } from './visit-mail';
import { writeWithdrawalMail } from './withdrawal-mail';

const HOUR_MS = 3_600_000;
const kinds: VisitMailKind[] = ['invitation', 'moved', 'elsewhere', 'cancelled'];
const text = (facts = visitMailFacts()) => renderMailText(writeVisitMail(facts).content);

describe('invitation', () => {
	it('says the participant’s own time first and the laboratory’s beside it (case T12)', () => {
		const body = text();
		expect(body).toContain(
			'When, on your clock: Mon 15 March 2027, 10:00 to 11:15 New York (UTC-4)'
		);
		expect(body).toContain('clock: Mon 15 March 2027, 15:00 to 16:15 Berlin (UTC+1)');
		expect(body).not.toContain('09:00');
		expect(writeVisitMail(visitMailFacts()).subject).toBe(
			'Your visit: Mon 15 Mar, 10:00 (New York time)'
		);
	});

	it('says one time when participant and laboratory share a zone', () => {
		const body = text(visitMailFacts({ participant: { name: 'Ben', zone: 'Europe/Berlin' } }));
		expect(body).toContain('When: Mon 15 March 2027, 15:00 to 16:15 Berlin (UTC+1)');
		expect(body.match(/15:00/g)).toHaveLength(1);
	});

	it('names both offsets when clocks change during the visit (case T8)', () => {
		const startMs = Date.parse('2027-03-28T00:30Z');
		const time = { startMs, endMs: startMs + 1.5 * HOUR_MS };
		const participant = { name: 'Ben', zone: 'Europe/Berlin' };
		expect(text(visitMailFacts({ time, participant }))).toContain(
			'01:30 Berlin (UTC+1) – 04:00 Berlin (UTC+2)'
		);
	});

	it('says where, how to find it, what to prepare, whom to call, how to answer and how to stop', () => {
		const body = text();
		for (const part of [
			'Room 2.14, Tidewater Movement Lab, Quay House, Hafenweg 2',
			'Second floor, ring at the glass door.',
			'Wear flat shoes.',
			'+49 30 000000',
			'lab@ovalry.example',
			'https://ovalry.example/visit/AbC',
			'You can stop taking part at any time'
		]) {
			expect(body).toContain(part);
		}
	});

	it('leaves out what the laboratory has not said', () => {
		const lab = { ...visitMailFacts().lab, phone: '', address: '' };
		const body = text(
			visitMailFacts({ lab, room: { name: 'Room 1', directions: '' }, preparation: '' })
		);
		expect(body).not.toMatch(/Call|How to find|Before you come|undefined/);
		expect(body).toContain('Reply to this mail.');
	});
});

describe('moved visit', () => {
	it('says the old and the new time', () => {
		const time = visitMailFacts().time;
		const oldTime = { startMs: time.startMs - 24 * HOUR_MS, endMs: time.endMs - 24 * HOUR_MS };
		const mail = writeVisitMail(visitMailFacts({ kind: 'moved', oldTime }));
		const body = renderMailText(mail.content);
		expect(body).toContain('Old time: Sun 14 March 2027, 10:00 to 11:15 New York (UTC-4)');
		expect(body).toContain('New time: Mon 15 March 2027, 10:00 to 11:15 New York (UTC-4)');
		expect(mail.subject).toBe('Visit moved: Mon 15 Mar, 10:00 (New York time)');
		expect(mail.event.description).not.toContain('Old time');
	});
});

describe('visit at another place', () => {
	it('says the old and the new place and that the time stays', () => {
		const mail = writeVisitMail(visitMailFacts({ kind: 'elsewhere', oldPlace: 'Room 1.01' }));
		const body = renderMailText(mail.content);
		expect(body).toContain('Old place: Room 1.01');
		expect(body).toContain('New place: Room 2.14, Tidewater Movement Lab');
		expect(body).toContain('The time stays');
		expect(mail.subject).toBe('Visit at another place: Mon 15 Mar, 10:00 (New York time)');
		expect(mail.event.description).not.toContain('Room 1.01');
	});
});

describe('cancelled visit', () => {
	it('says what no longer takes place and asks for nothing', () => {
		const mail = writeVisitMail(visitMailFacts({ kind: 'cancelled', answerUrl: undefined }));
		const body = renderMailText(mail.content);
		expect(mail.subject).toBe('Visit cancelled: Mon 15 Mar, 10:00 (New York time)');
		expect(body).toContain('It was at: Mon 15 March 2027, 10:00 to 11:15 New York (UTC-4)');
		expect(body).not.toContain('Can you come?');
	});
});

describe('confirmed withdrawal', () => {
	const facts = {
		language: 'en',
		publicTitle: 'Practising a sliding movement',
		participant: { name: 'Anna Beck', zone: 'America/New_York' },
		lab: visitMailFacts().lab
	};

	it('lists the visits that are cancelled', () => {
		const visit = { ...visitMailFacts().time, visitNumber: 3 };
		const body = renderMailText(
			writeWithdrawalMail({ ...facts, cancelledVisits: [visit] }).content
		);
		expect(body).toContain('Visit 3: Mon 15 March 2027, 10:00 to 11:15 New York (UTC-4)');
	});

	it('says so when no visit was booked', () => {
		const body = renderMailText(writeWithdrawalMail({ ...facts, cancelledVisits: [] }).content);
		expect(body).toContain('No visit was booked for you any more.');
	});
});

describe('what shows outside the mail’s body (checklist 14 and 45)', () => {
	it.each(kinds)('tells nothing of the study in a mail of kind %s', (kind) => {
		const mail = writeVisitMail(visitMailFacts({ kind }));
		const shown = [mail.subject, mail.event.summary, mail.event.location, mail.content.title];
		shown.push(mail.event.description, 'invite.ics', '/visit/');
		const working = 'Puck release under a moving target';
		expect(shown.flatMap((part) => findTellingWords(part, working))).toEqual([]);
		expect(mail.event.summary).toBe('Practising a sliding movement');
	});

	it('keeps the public title out of a subject that others may read over a shoulder', () => {
		const subjects = kinds.map((kind) => writeVisitMail(visitMailFacts({ kind })).subject);
		expect(subjects.filter((subject) => subject.includes('sliding'))).toEqual([]);
	});
});

describe('language', () => {
	it('falls back to English and says that it is English', () => {
		const { content } = writeVisitMail(visitMailFacts({ language: 'ar' }));
		expect([content.language, content.direction]).toEqual(['en', 'ltr']);
	});
});
