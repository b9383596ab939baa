import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { findAnswerLink, requireAnswerLink } from '$lib/server/access/require-answer-link';
import { answerVisit } from '$lib/server/answers/answer-visit';
import { askToStop, STOP_NOTE } from '$lib/server/answers/ask-to-stop';
import { loadAnswerPage } from '$lib/server/answers/load-answer-page';
import { openDatabase, type DatabaseHandle } from '$lib/server/db/client';
import { booking, outbox, participant, recordEvent, studyPause } from '$lib/server/db/schema';
import { enqueueInvitations } from '$lib/server/invitations/enqueue-invitations';
import { enqueueMove } from '$lib/server/invitations/enqueue-visit-change';
import { sendDueMail } from '$lib/server/invitations/send-due-mail';
import { makeLinkToken } from '$lib/server/mail/mail-link';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import { createDatabase, type TestDatabase } from '../support/create-database';
import {
	createTestClock,
	createTestKeys,
	plantedNowMs,
	plantLab,
	plantStudy,
	type PlantedStudy
} from '../support/planted-study';
import { plantBooking, plantParticipant, shiftBooking } from '../support/planted-visit';
import { createRecordingSender } from '../support/recording-sender';

const HOUR_MS = 3_600_000;
const startMs = Date.parse('2027-03-10T10:00Z');

let database: TestDatabase;
let owner: DatabaseHandle;
let app: DatabaseHandle;
let keys: PeopleKeys;
let setting: MailSetting;
let home: PlantedStudy;
let participantId: string;
let bookingId: string;
let token: string;
let clock = createTestClock();

beforeAll(async () => {
	database = await createDatabase();
	owner = openDatabase(database.ownerUrl);
	app = openDatabase(database.appUrl);
	keys = await createTestKeys();
	setting = {
		keys: keys.folder,
		origin: 'https://ovalry.example',
		fromAddress: 'lab@ovalry.example'
	};
});
afterAll(async () => {
	await Promise.all([owner.end(), app.end()]);
	await database.drop();
});

/** Sends what is due and gives back the links in it, oldest first. */
async function sentTokens(): Promise<string[]> {
	const post = createRecordingSender();
	await sendDueMail(app.db, clock, { sender: post.sender, keys: keys.folder });
	return (await post.read()).flatMap((mail) => mail.answerToken ?? []);
}

beforeEach(async () => {
	await owner.db.delete(outbox);
	clock = createTestClock(plantedNowMs);
	home = await plantStudy(owner.db, await plantLab(owner.db));
	({ participantId } = await plantParticipant(owner.db, keys, home));
	bookingId = await plantBooking(owner.db, home, { participantId, visitNumber: 1, startMs });
	await app.db.transaction((tx) => enqueueInvitations(tx, clock, setting, participantId));
	[token = ''] = await sentTokens();
});

async function linkOf(text = token) {
	const link = await findAnswerLink(app.db, text);
	if (!link) throw new Error('no such link');
	return link;
}
const open = async (text = token) => loadAnswerPage(app.db, clock, setting, await linkOf(text));
const say = async (answer: 'accepted' | 'declined' | 'asks-other-time', note = '', text = token) =>
	answerVisit(app.db, clock, setting, { link: await linkOf(text), answer, note });
const stored = async () => {
	const [row] = await owner.db.select().from(booking).where(eq(booking.id, bookingId));
	if (!row) throw new Error('no booking');
	return row;
};
async function move(toMs: number): Promise<string> {
	await app.db.transaction(async (tx) => {
		await shiftBooking(tx, bookingId, toMs);
		await enqueueMove(tx, clock, setting, bookingId);
	});
	const [next = ''] = await sentTokens();
	return next;
}

describe('the page behind a link', () => {
	it('says when on both clocks, where, whom to call', async () => {
		expect(await open()).toMatchObject({
			state: 'open',
			publicTitle: 'Practising a sliding movement',
			startMs,
			zone: 'America/New_York',
			place: 'Room 1, Tidewater Movement Lab',
			lab: { zone: 'Europe/Lisbon', email: 'lab@ovalry.example' },
			answer: 'none'
		});
	});

	it('changes nothing however often it is opened (case T20)', async () => {
		const before = JSON.stringify(await stored());
		for (let i = 0; i < 10; i++) await open();
		expect(JSON.stringify(await stored())).toBe(before);
	});

	it('tells nothing of the study but its public title', async () => {
		const text = JSON.stringify(await open());
		expect(text).not.toMatch(/Puck release|adaptive|fixed|arm|TW-/i);
		expect(text).not.toContain(home.studyId);
	});

	it('is not there for another token, whatever it looks like', async () => {
		for (const wrong of ['', 'x', makeLinkToken().token, `${token}x`, token.toLowerCase()]) {
			expect(await findAnswerLink(app.db, wrong)).toBeNull();
		}
	});

	it('answers 404 to a wrong link, and 429 once many were tried from one place', async () => {
		const visit = {
			locals: { db: app.db },
			params: { token: makeLinkToken().token },
			getClientAddress: () => '192.0.2.7'
		};
		const statuses: number[] = [];
		for (let i = 0; i < 61; i++) {
			await requireAnswerLink(visit).catch((error) => statuses.push(error.status));
		}
		expect([...new Set(statuses)]).toEqual([404, 429]);
		expect(await requireAnswerLink({ ...visit, params: { token } })).toMatchObject({ bookingId });
	});
});

describe('an answer', () => {
	it.each(['accepted', 'declined', 'asks-other-time'] as const)('%s is kept', async (answer) => {
		expect(await say(answer, 'Tuesday after 15:00')).toEqual({ ok: true });
		const row = await stored();
		expect(row.answer).toBe(answer);
		expect(row.answeredAt?.getTime()).toBe(clock.now());
		expect(Buffer.from(row.answerNote ?? []).toString('latin1')).not.toContain('Tuesday');
		expect(await open()).toMatchObject({ answer, note: 'Tuesday after 15:00' });
	});

	it('is replaced by a later one, which asks the coordinator anew', async () => {
		await say('declined', 'ill');
		await owner.db
			.update(booking)
			.set({ requestSettledAt: new Date(clock.now()) })
			.where(eq(booking.id, bookingId));
		await say('asks-other-time', 'well again');
		expect(await stored()).toMatchObject({ answer: 'asks-other-time', requestSettledAt: null });
		await say('accepted');
		expect(await stored()).toMatchObject({ answer: 'accepted', answerNote: null });
	});

	it('stands in the record without its words', async () => {
		await say('declined', 'my knee hurts');
		const events = await owner.db
			.select()
			.from(recordEvent)
			.where(eq(recordEvent.participantId, participantId));
		const event = events.find((one) => one.kind === 'visit-answered');
		expect(event).toMatchObject({ actorKind: 'participant', item: 'booking' });
		expect(event?.body).toContain('declined');
		expect(event?.body).not.toContain('knee');
	});

	it('given for the old time is refused, and the old link still tells everything (case T16)', async () => {
		const newToken = await move(startMs + 4 * HOUR_MS);
		expect(newToken).not.toBe('');
		expect(await say('accepted')).toEqual({ ok: false, reason: 'moved' });
		expect((await stored()).answer).toBe('none');
		expect(await open()).toMatchObject({
			state: 'moved',
			startMs: startMs + 4 * HOUR_MS,
			place: 'Room 1, Tidewater Movement Lab'
		});
		expect(await say('accepted', '', newToken)).toEqual({ ok: true });
		expect((await stored()).answer).toBe('accepted');
	});

	it('comes too late once the visit has begun', async () => {
		clock.set(startMs);
		expect(await say('declined')).toEqual({ ok: false, reason: 'begun' });
		expect(await open()).toMatchObject({ state: 'begun' });
	});

	it('is refused for a cancelled visit and after withdrawal', async () => {
		await owner.db.update(booking).set({ state: 'cancelled' }).where(eq(booking.id, bookingId));
		expect(await say('accepted')).toEqual({ ok: false, reason: 'cancelled' });
		await owner.db
			.update(participant)
			.set({ state: 'withdrawn', withdrawnAt: new Date(clock.now()) })
			.where(eq(participant.id, participantId));
		expect(await say('accepted')).toEqual({ ok: false, reason: 'stopped' });
	});

	it('is one of two when both come at once, never a mixture', async () => {
		await Promise.all([say('accepted', 'A'), say('declined', 'B')]);
		const { answer, note } = await open();
		expect([
			['accepted', 'A'],
			['declined', 'B']
		]).toContainEqual([answer, note]);
	});
});

describe('stopping by a link', () => {
	it('pauses everything for this person at once and asks the coordinator', async () => {
		await plantBooking(owner.db, home, {
			participantId,
			visitNumber: 2,
			startMs: startMs + 72 * HOUR_MS
		});
		expect(await askToStop(app.db, clock, setting, await linkOf())).toEqual({ ok: true });
		expect(await stored()).toMatchObject({ answer: 'declined', requestSettledAt: null });
		expect(await open()).toMatchObject({ isStopping: true, note: STOP_NOTE });
		await app.db.transaction(async (tx) => {
			await tx
				.update(participant)
				.set({ allocatedAt: new Date(clock.now()) })
				.where(eq(participant.id, participantId));
			await enqueueInvitations(tx, clock, setting, participantId);
		});
		clock.set(startMs + 48 * HOUR_MS);
		expect(await sentTokens()).toEqual([]);
	});

	it('works by an old link, and once only', async () => {
		await move(startMs + HOUR_MS);
		await askToStop(app.db, clock, setting, await linkOf());
		await askToStop(app.db, clock, setting, await linkOf());
		const pauses = await owner.db
			.select()
			.from(studyPause)
			.where(eq(studyPause.participantId, participantId));
		expect(pauses).toHaveLength(1);
		expect(pauses[0]?.pausedBy).toBeNull();
	});

	it('has nothing to do for somebody who has withdrawn', async () => {
		await owner.db
			.update(participant)
			.set({ state: 'withdrawn', withdrawnAt: new Date(clock.now()) })
			.where(eq(participant.id, participantId));
		const outcome = await askToStop(app.db, clock, setting, await linkOf());
		expect(outcome).toEqual({ ok: false, reason: 'stopped' });
	});
});
