import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, it } from 'vitest';
import { openDatabase, type DatabaseHandle, type Transaction } from '$lib/server/db/client';
import { booking, contact, outbox, participant, studyPause } from '$lib/server/db/schema';
import { enqueueInvitations } from '$lib/server/invitations/enqueue-invitations';
import {
	enqueueCancellation,
	enqueueMove,
	renewFailedMail
} from '$lib/server/invitations/enqueue-visit-change';
import { enqueueWithdrawal } from '$lib/server/invitations/enqueue-withdrawal';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import { sendDueMail } from '$lib/server/invitations/send-due-mail';
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
const MINUTE_MS = 60_000;
const baselineMs = Date.parse('2027-03-10T10:00Z');
const dayOneMs = Date.parse('2027-03-15T14:00Z');

let database: TestDatabase;
let owner: DatabaseHandle;
let app: DatabaseHandle;
let keys: PeopleKeys;
let setting: MailSetting;
let home: PlantedStudy;
let person: { participantId: string; email: string };
let baseline: string;
let dayOne: string;
let clock = createTestClock();
let post = createRecordingSender();

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

beforeEach(async () => {
	await owner.db.delete(outbox);
	home = await plantStudy(owner.db, await plantLab(owner.db));
	person = await plantParticipant(owner.db, keys, home);
	const { participantId } = person;
	baseline = await plantBooking(owner.db, home, {
		participantId,
		visitNumber: 1,
		startMs: baselineMs
	});
	dayOne = await plantBooking(owner.db, home, { participantId, visitNumber: 2, startMs: dayOneMs });
	clock = createTestClock(plantedNowMs);
	post = createRecordingSender();
});

const run = () => sendDueMail(app.db, clock, { sender: post.sender, keys: keys.folder });
const inTransaction = <T>(work: (tx: Transaction) => Promise<T>) => app.db.transaction(work);
const invite = () =>
	inTransaction((tx) => enqueueInvitations(tx, clock, setting, person.participantId));
const move = (bookingId: string, startMs: number) =>
	inTransaction(async (tx) => {
		await shiftBooking(tx, bookingId, startMs);
		return enqueueMove(tx, clock, setting, bookingId);
	});
const cancel = (bookingId: string) =>
	inTransaction(async (tx) => {
		await tx.update(booking).set({ state: 'cancelled' }).where(eq(booking.id, bookingId));
		return enqueueCancellation(tx, clock, setting, bookingId);
	});
const states = async () => {
	const rows = await owner.db.select().from(outbox).orderBy(outbox.createdAt, outbox.sequence);
	return rows.map((row) => `${row.kind} ${row.sequence} ${row.state}`);
};
const later = (ms: number) => clock.set(clock.now() + ms);

describe('invitations on the study’s timeline', () => {
	it('go out at once for the baseline visit and for no other before allocation', async () => {
		expect(await invite()).toEqual({ ok: true, queuedCount: 1 });
		expect(await run()).toMatchObject({ sent: 1 });
		const [mail] = await post.read();
		expect(post.given[0]?.to).toBe(person.email);
		expect(mail?.subject).toBe('Your visit: Wed 10 Mar, 05:00 (New York time)');
		expect(mail?.method).toBe('REQUEST');
		expect(mail?.uid).toBe(`${baseline}@ovalry.example`);
		expect(mail?.sequence).toBe(0);
	});

	it('go out for the other visits the protocol’s hours after the baseline visit, one mail each', async () => {
		await invite();
		await run();
		post.clear();
		clock.set(baselineMs + 3 * HOUR_MS);
		await owner.db.update(booking).set({ state: 'attended' }).where(eq(booking.id, baseline));
		await owner.db
			.update(participant)
			.set({ state: 'allocated', allocatedAt: new Date(clock.now()) })
			.where(eq(participant.id, person.participantId));
		expect(await invite()).toEqual({ ok: true, queuedCount: 1 });
		clock.set(baselineMs + (24 * 60 + 44) * MINUTE_MS);
		expect(await run()).toMatchObject({ sent: 0 });
		clock.set(baselineMs + (24 * 60 + 45) * MINUTE_MS);
		expect(await run()).toMatchObject({ sent: 1 });
		expect((await post.read())[0]?.uid).toBe(`${dayOne}@ovalry.example`);
	});

	it('are not repeated when asked for again', async () => {
		await invite();
		expect(await invite()).toEqual({ ok: true, queuedCount: 0 });
		await run();
		await run();
		expect(post.given).toHaveLength(1);
	});

	it('leave no row when the caller’s transaction fails', async () => {
		const failing = inTransaction(async (tx) => {
			await enqueueInvitations(tx, clock, setting, person.participantId);
			throw new Error('the booking fell through');
		});
		await expect(failing).rejects.toThrow('fell through');
		expect(await states()).toEqual([]);
	});

	it('keep every word about the person unreadable without their key', async () => {
		await invite();
		const [row] = await owner.db.select().from(outbox);
		const stored = Buffer.from(row?.sealed ?? []).toString('latin1');
		expect(stored).not.toContain('Anna');
		expect(JSON.stringify({ ...row, sealed: '' })).not.toContain(person.email);
	});
});

describe('a moved visit', () => {
	it('sends one update of the same event, threaded, with a newer stamp', async () => {
		await invite();
		await run();
		later(HOUR_MS);
		expect(await move(baseline, baselineMs + 4 * HOUR_MS)).toEqual({ ok: true, queued: 'moved' });
		await run();
		const [first, second] = await post.read();
		expect(second?.uid).toBe(first?.uid);
		expect(second?.sequence).toBe(1);
		expect(String(second?.stamp) > String(first?.stamp)).toBe(true);
		expect(second?.inReplyTo).toBe(first?.messageId);
		expect(second?.start).toBe('2027-03-10T14:00:00');
		expect(second?.text).toContain('Old time: Wed 10 March 2027, 05:00 to 05:45 New York (UTC-5)');
		expect(second?.text).toContain('New time: Wed 10 March 2027, 09:00 to 09:45 New York (UTC-5)');
	});

	it('clears an answer given for the old time', async () => {
		await invite();
		await run();
		await owner.db.update(booking).set({ answer: 'accepted' }).where(eq(booking.id, baseline));
		await move(baseline, baselineMs + HOUR_MS);
		const [row] = await owner.db.select().from(booking).where(eq(booking.id, baseline));
		expect([row?.answer, row?.sequence]).toEqual(['none', 1]);
	});

	it('replaces an invitation that has not left, as an invitation', async () => {
		await invite();
		expect(await move(baseline, baselineMs + HOUR_MS)).toEqual({ ok: true, queued: 'invitation' });
		expect(await run()).toMatchObject({ sent: 1 });
		expect(await states()).toEqual(['invitation 0 superseded', 'invitation 1 sent']);
		expect((await post.read())[0]?.subject).toMatch(/^Your visit: /);
	});

	it('sends only the last of several moves, which names the time that was told', async () => {
		await invite();
		await run();
		post.clear();
		await move(baseline, baselineMs + HOUR_MS);
		await move(baseline, baselineMs + 2 * HOUR_MS);
		await move(baseline, baselineMs + 3 * HOUR_MS);
		await run();
		const mails = await post.read();
		expect(mails.map((mail) => mail.sequence)).toEqual([3]);
		expect(mails[0]?.text).toContain('Old time: Wed 10 March 2027, 05:00');
	});

	it('sends nothing when nothing that was told has changed, or nothing was told', async () => {
		await invite();
		await run();
		expect(await move(baseline, baselineMs)).toEqual({ ok: true, queued: 'nothing' });
		expect(await move(dayOne, dayOneMs + HOUR_MS)).toEqual({ ok: true, queued: 'nothing' });
	});

	it('keeps the hour of an invitation that waits for its time', async () => {
		await owner.db
			.update(participant)
			.set({ state: 'allocated', allocatedAt: new Date(plantedNowMs) })
			.where(eq(participant.id, person.participantId));
		await invite();
		await move(dayOne, dayOneMs + HOUR_MS);
		const rows = await owner.db.select().from(outbox).where(eq(outbox.bookingId, dayOne));
		expect(new Set(rows.map((row) => row.dueAt.getTime())).size).toBe(1);
	});
});

describe('a cancelled visit', () => {
	it('removes the event that was sent', async () => {
		await invite();
		await run();
		expect(await cancel(baseline)).toEqual({ ok: true, queued: 'cancelled' });
		await run();
		const [first, second] = await post.read();
		expect(second?.method).toBe('CANCEL');
		expect(second?.uid).toBe(first?.uid);
		expect(second?.sequence).toBe(1);
		expect(second?.answerToken).toBeUndefined();
	});

	it('sends nothing when its invitation never left, and the invitation neither', async () => {
		await invite();
		expect(await cancel(baseline)).toEqual({ ok: true, queued: 'nothing' });
		await run();
		expect(post.given).toEqual([]);
		expect(await states()).toEqual(['invitation 0 superseded']);
	});

	it('names the time that was told, not one that never was', async () => {
		await invite();
		await run();
		await move(baseline, baselineMs + HOUR_MS);
		await cancel(baseline);
		await run();
		const mails = await post.read();
		expect(mails.map((mail) => mail.method)).toEqual(['REQUEST', 'CANCEL']);
		expect(mails[1]?.text).toContain('It was at: Wed 10 March 2027, 05:00');
	});
});

describe('withdrawal and pause', () => {
	it('confirms a withdrawal, takes told visits out of the calendar, and sends nothing else', async () => {
		await owner.db
			.update(participant)
			.set({ state: 'allocated', allocatedAt: new Date(plantedNowMs) })
			.where(eq(participant.id, person.participantId));
		await invite();
		await run();
		post.clear();
		await inTransaction(async (tx) => {
			const { participantId } = person;
			await tx
				.update(participant)
				.set({ state: 'withdrawn', withdrawnAt: new Date(clock.now()) })
				.where(eq(participant.id, participantId));
			await tx
				.update(booking)
				.set({ state: 'cancelled' })
				.where(eq(booking.participantId, participantId));
			const cancelledBookingIds = [baseline, dayOne];
			await enqueueWithdrawal(tx, clock, setting, { participantId, cancelledBookingIds });
		});
		clock.set(dayOneMs);
		await run();
		const mails = await post.read();
		expect(mails.map((mail) => mail.method ?? 'none').sort()).toEqual(['CANCEL', 'none']);
		const confirmation = mails.find((mail) => !mail.method);
		expect(confirmation?.subject).toBe('You have stopped taking part');
		expect(confirmation?.text).toContain('Visit 1: Wed 10 March 2027, 05:00');
		expect(confirmation?.text).not.toContain('Visit 2');
	});

	it('holds invitations while the study is paused and sends them once it is lifted', async () => {
		await invite();
		const pause = { studyId: home.studyId, reason: 'a rig made a noise', pausedAt: new Date() };
		await owner.db.insert(studyPause).values(pause);
		expect(await run()).toMatchObject({ sent: 0 });
		await owner.db.delete(studyPause);
		expect(await run()).toMatchObject({ sent: 1 });
	});

	it('holds the invitations of one paused participant only', async () => {
		const other = await plantParticipant(owner.db, keys, home);
		await plantBooking(owner.db, home, {
			participantId: other.participantId,
			visitNumber: 1,
			startMs: baselineMs,
			rigIndex: 1
		});
		await invite();
		await inTransaction((tx) => enqueueInvitations(tx, clock, setting, other.participantId));
		const { participantId } = person;
		const pause = { studyId: home.studyId, participantId, reason: 'ill', pausedAt: new Date() };
		await owner.db.insert(studyPause).values(pause);
		await run();
		expect(post.given.map((mail) => mail.to)).toEqual([other.email]);
		await owner.db.delete(studyPause);
	});

	it('tells of a cancellation even while the study is paused', async () => {
		await invite();
		await run();
		await owner.db
			.insert(studyPause)
			.values({ studyId: home.studyId, reason: 'a rig made a noise', pausedAt: new Date() });
		await cancel(baseline);
		await run();
		expect((await post.read()).map((mail) => mail.method)).toEqual(['REQUEST', 'CANCEL']);
		await owner.db.delete(studyPause);
	});
});

describe('sending once', () => {
	it('is kept by ten processes at the same time', async () => {
		await invite();
		const runs = await Promise.all(Array.from({ length: 10 }, run));
		expect(runs.reduce((sum, one) => sum + one.sent, 0)).toBe(1);
		expect(post.given).toHaveLength(1);
	});

	it('repeats the same bytes after a process died between sending and writing it down', async () => {
		await invite();
		post.answerNext('die');
		await expect(run()).rejects.toThrow('died');
		expect(await run()).toMatchObject({ sent: 0 });
		later(16 * MINUTE_MS);
		expect(await run()).toMatchObject({ sent: 1 });
		expect(post.given[1]?.mime.equals(post.given[0]?.mime ?? Buffer.of())).toBe(true);
		expect(await states()).toEqual(['invitation 0 sent']);
	});

	it('repeats the same bytes when the server never answered, until it does', async () => {
		await invite();
		post.answerNext({ state: 'unknown', reason: 'no-answer', detail: '' });
		expect(await run()).toMatchObject({ unknown: 1 });
		expect(await states()).toEqual(['invitation 0 unknown']);
		later(2 * MINUTE_MS);
		expect(await run()).toMatchObject({ sent: 1 });
		expect(post.given[1]?.mime.equals(post.given[0]?.mime ?? Buffer.of())).toBe(true);
	});

	it('does not repeat a confirmation of withdrawal whose fate is unknown', async () => {
		const { participantId } = person;
		await inTransaction((tx) =>
			enqueueWithdrawal(tx, clock, setting, { participantId, cancelledBookingIds: [] })
		);
		post.answerNext('die');
		await expect(run()).rejects.toThrow('died');
		later(16 * MINUTE_MS);
		expect(await run()).toMatchObject({ sent: 0, unknown: 1 });
		expect(post.given).toHaveLength(1);
	});

	it('tries again later when the server is busy', async () => {
		await invite();
		post.answerNext({ state: 'retry', reason: 'busy', detail: '451' });
		expect(await run()).toMatchObject({ retried: 1 });
		expect(await run()).toMatchObject({ sent: 0 });
		later(75_000);
		expect(await run()).toMatchObject({ sent: 1 });
	});

	it('tells of a move as news when the invitation may have arrived, and sends that one no more', async () => {
		await invite();
		post.answerNext({ state: 'unknown', reason: 'no-answer', detail: '' });
		await run();
		expect(await move(baseline, baselineMs + HOUR_MS)).toEqual({ ok: true, queued: 'moved' });
		later(2 * MINUTE_MS);
		await run();
		expect((await post.read()).map((mail) => mail.sequence)).toEqual([0, 1]);
		expect(await states()).toEqual(['invitation 0 unknown', 'moved 1 sent']);
	});

	it('waits with a cancellation while the invitation is being sent', async () => {
		await invite();
		post.answerNext('die');
		await expect(run()).rejects.toThrow('died');
		await cancel(baseline);
		expect(await run()).toMatchObject({ sent: 0 });
		later(16 * MINUTE_MS);
		expect(await run()).toMatchObject({ sent: 1 });
		expect((await post.read()).map((mail) => mail.method)).toEqual(['REQUEST', 'CANCEL']);
	});

	it('sends no invitation to a visit that has begun', async () => {
		await invite();
		clock.set(baselineMs);
		expect(await run()).toMatchObject({ sent: 0 });
		expect(await states()).toEqual(['invitation 0 failed']);
	});
});

describe('an address that a server refuses', () => {
	const refused = { state: 'permanent', reason: 'address-refused', detail: '550' } as const;

	it('gets nothing more until it is mended, then an invitation anew', async () => {
		await invite();
		post.answerNext(refused);
		expect(await run()).toMatchObject({ failed: 1 });
		await move(baseline, baselineMs + HOUR_MS);
		expect(await run()).toMatchObject({ sent: 0 });
		expect(post.given).toHaveLength(1);
		later(MINUTE_MS);
		const { participantId } = person;
		const details = { name: 'Anna Sample', email: 'right@people.example' };
		const sealed = await keys.folder.encrypt(participantId, JSON.stringify(details));
		await inTransaction(async (tx) => {
			await tx
				.update(contact)
				.set({ sealed, updatedAt: new Date(clock.now()) })
				.where(eq(contact.participantId, participantId));
			await renewFailedMail(tx, clock, setting, participantId);
		});
		expect(await run()).toMatchObject({ sent: 1 });
		expect(post.given[1]?.to).toBe('right@people.example');
		expect((await post.read())[1]?.subject).toMatch(/^Your visit: /);
	});
});

describe('an erased person', () => {
	it('gets no mail and stops nobody else’s', async () => {
		await invite();
		await keys.folder.destroyKey(person.participantId);
		expect(await run()).toMatchObject({ failed: 1, sent: 0 });
		expect(post.given).toEqual([]);
	});
});
