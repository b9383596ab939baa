import { eq } from 'drizzle-orm';
import { describe, expect, it } from 'vitest';
import { booking, outbox } from '$lib/server/db/schema';
import { enqueueInvitations } from '$lib/server/invitations/enqueue-invitations';
import { baselineMs, dayOneMs, HOUR_MS, MINUTE_MS, useMailBench } from '../support/mail-bench';
import { plantedNowMs } from '../support/planted-study';

const { bench, allocate, inTransaction, invite, later, move, run, states } = useMailBench();

describe('invitations on the study’s timeline', () => {
	it('go out at once for the baseline visit and for no other before allocation', async () => {
		expect(await invite()).toEqual({ ok: true, queuedCount: 1 });
		expect(await run()).toMatchObject({ sent: 1 });
		const [mail] = await bench.post.read();
		expect(bench.post.given[0]?.to).toBe(bench.person.email);
		expect(mail?.subject).toBe('Your visit: Wed 10 Mar, 05:00 (New York time)');
		expect(mail?.method).toBe('REQUEST');
		expect(mail?.uid).toBe(`${bench.baseline}@ovalry.example`);
		expect(mail?.sequence).toBe(0);
	});

	it('go out for the other visits the protocol’s hours after the baseline visit, one mail each', async () => {
		await invite();
		await run();
		bench.post.clear();
		bench.clock.set(baselineMs + 3 * HOUR_MS);
		await bench.owner.db
			.update(booking)
			.set({ state: 'attended' })
			.where(eq(booking.id, bench.baseline));
		await allocate(bench.clock.now());
		expect(await invite()).toEqual({ ok: true, queuedCount: 1 });
		bench.clock.set(baselineMs + (24 * 60 + 44) * MINUTE_MS);
		expect(await run()).toMatchObject({ sent: 0 });
		bench.clock.set(baselineMs + (24 * 60 + 45) * MINUTE_MS);
		expect(await run()).toMatchObject({ sent: 1 });
		expect((await bench.post.read())[0]?.uid).toBe(`${bench.dayOne}@ovalry.example`);
	});

	it('are not repeated when asked for again', async () => {
		await invite();
		expect(await invite()).toEqual({ ok: true, queuedCount: 0 });
		await run();
		await run();
		expect(bench.post.given).toHaveLength(1);
	});

	it('leave no row when the caller’s transaction fails', async () => {
		const failing = inTransaction(async (tx) => {
			await enqueueInvitations(tx, bench.clock, bench.setting, bench.person.participantId);
			throw new Error('the booking fell through');
		});
		await expect(failing).rejects.toThrow('fell through');
		expect(await states()).toEqual([]);
	});

	it('keep every word about the person unreadable without their key', async () => {
		await invite();
		const [row] = await bench.owner.db.select().from(outbox);
		const stored = Buffer.from(row?.sealed ?? []).toString('latin1');
		expect(stored).not.toContain('Anna');
		expect(JSON.stringify({ ...row, sealed: '' })).not.toContain(bench.person.email);
	});
});

describe('a moved visit', () => {
	it('sends one update of the same event, threaded, with a newer stamp', async () => {
		await invite();
		await run();
		later(HOUR_MS);
		expect(await move(bench.baseline, baselineMs + 4 * HOUR_MS)).toEqual({
			ok: true,
			queued: 'moved'
		});
		await run();
		const [first, second] = await bench.post.read();
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
		await bench.owner.db
			.update(booking)
			.set({ answer: 'accepted' })
			.where(eq(booking.id, bench.baseline));
		await move(bench.baseline, baselineMs + HOUR_MS);
		const [row] = await bench.owner.db.select().from(booking).where(eq(booking.id, bench.baseline));
		expect([row?.answer, row?.sequence]).toEqual(['none', 1]);
	});

	it('replaces an invitation that has not left, as an invitation', async () => {
		await invite();
		expect(await move(bench.baseline, baselineMs + HOUR_MS)).toEqual({
			ok: true,
			queued: 'invitation'
		});
		expect(await run()).toMatchObject({ sent: 1 });
		expect(await states()).toEqual(['invitation 0 superseded', 'invitation 1 sent']);
		expect((await bench.post.read())[0]?.subject).toMatch(/^Your visit: /);
	});

	it('sends only the last of several moves, which names the time that was told', async () => {
		await invite();
		await run();
		bench.post.clear();
		await move(bench.baseline, baselineMs + HOUR_MS);
		await move(bench.baseline, baselineMs + 2 * HOUR_MS);
		await move(bench.baseline, baselineMs + 3 * HOUR_MS);
		await run();
		const mails = await bench.post.read();
		expect(mails.map((mail) => mail.sequence)).toEqual([3]);
		expect(mails[0]?.text).toContain('Old time: Wed 10 March 2027, 05:00');
	});

	it('sends nothing when nothing that was told has changed, or nothing was told', async () => {
		await invite();
		await run();
		expect(await move(bench.baseline, baselineMs)).toEqual({ ok: true, queued: 'nothing' });
		expect(await move(bench.dayOne, dayOneMs + HOUR_MS)).toEqual({ ok: true, queued: 'nothing' });
	});

	it('keeps the hour of an invitation that waits for its time', async () => {
		await allocate(plantedNowMs);
		await invite();
		await move(bench.dayOne, dayOneMs + HOUR_MS);
		const rows = await bench.owner.db
			.select()
			.from(outbox)
			.where(eq(outbox.bookingId, bench.dayOne));
		expect(new Set(rows.map((row) => row.dueAt.getTime())).size).toBe(1);
	});
});
