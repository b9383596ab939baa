import { eq } from 'drizzle-orm';
import { describe, expect, it } from 'vitest';
import { contact } from '$lib/server/db/schema';
import { renewFailedMail } from '$lib/server/invitations/enqueue-visit-change';
import { enqueueWithdrawal } from '$lib/server/invitations/enqueue-withdrawal';
import { baselineMs, HOUR_MS, MINUTE_MS, useMailBench } from '../support/mail-bench';

const { bench, cancel, inTransaction, invite, later, move, run, states } = useMailBench();

describe('sending once', () => {
	it('is kept by ten processes at the same time', async () => {
		await invite();
		const runs = await Promise.all(Array.from({ length: 10 }, run));
		expect(runs.reduce((sum, one) => sum + one.sent, 0)).toBe(1);
		expect(bench.post.given).toHaveLength(1);
	});

	it('repeats the same bytes after a process died between sending and writing it down', async () => {
		await invite();
		bench.post.answerNext('die');
		await expect(run()).rejects.toThrow('died');
		expect(await run()).toMatchObject({ sent: 0 });
		later(16 * MINUTE_MS);
		expect(await run()).toMatchObject({ sent: 1 });
		expect(bench.post.given[1]?.mime.equals(bench.post.given[0]?.mime ?? Buffer.of())).toBe(true);
		expect(await states()).toEqual(['invitation 0 sent']);
	});

	it('repeats the same bytes when the server never answered, until it does', async () => {
		await invite();
		bench.post.answerNext({ state: 'unknown', reason: 'no-answer', detail: '' });
		expect(await run()).toMatchObject({ unknown: 1 });
		expect(await states()).toEqual(['invitation 0 unknown']);
		later(2 * MINUTE_MS);
		expect(await run()).toMatchObject({ sent: 1 });
		expect(bench.post.given[1]?.mime.equals(bench.post.given[0]?.mime ?? Buffer.of())).toBe(true);
	});

	it('does not repeat a confirmation of withdrawal whose fate is unknown', async () => {
		const { participantId } = bench.person;
		await inTransaction((tx) =>
			enqueueWithdrawal(tx, bench.clock, bench.setting, { participantId, cancelledBookingIds: [] })
		);
		bench.post.answerNext('die');
		await expect(run()).rejects.toThrow('died');
		later(16 * MINUTE_MS);
		expect(await run()).toMatchObject({ sent: 0, unknown: 1 });
		expect(bench.post.given).toHaveLength(1);
	});

	it('tries again later when the server is busy', async () => {
		await invite();
		bench.post.answerNext({ state: 'retry', reason: 'busy', detail: '451' });
		expect(await run()).toMatchObject({ retried: 1 });
		expect(await run()).toMatchObject({ sent: 0 });
		later(75_000);
		expect(await run()).toMatchObject({ sent: 1 });
	});

	it('tells of a move as news when the invitation may have arrived, and sends that one no more', async () => {
		await invite();
		bench.post.answerNext({ state: 'unknown', reason: 'no-answer', detail: '' });
		await run();
		expect(await move(bench.baseline, baselineMs + HOUR_MS)).toEqual({ ok: true, queued: 'moved' });
		later(2 * MINUTE_MS);
		await run();
		expect((await bench.post.read()).map((mail) => mail.sequence)).toEqual([0, 1]);
		expect(await states()).toEqual(['invitation 0 unknown', 'moved 1 sent']);
	});

	it('waits with a cancellation while the invitation is being sent', async () => {
		await invite();
		bench.post.answerNext('die');
		await expect(run()).rejects.toThrow('died');
		await cancel(bench.baseline);
		expect(await run()).toMatchObject({ sent: 0 });
		later(16 * MINUTE_MS);
		expect(await run()).toMatchObject({ sent: 1 });
		expect((await bench.post.read()).map((mail) => mail.method)).toEqual(['REQUEST', 'CANCEL']);
	});

	it('sends no invitation to a visit that has begun', async () => {
		await invite();
		bench.clock.set(baselineMs);
		expect(await run()).toMatchObject({ sent: 0 });
		expect(await states()).toEqual(['invitation 0 failed']);
	});
});

describe('an address that a server refuses', () => {
	const refused = { state: 'permanent', reason: 'address-refused', detail: '550' } as const;

	it('gets nothing more until it is mended, then an invitation anew', async () => {
		await invite();
		bench.post.answerNext(refused);
		expect(await run()).toMatchObject({ failed: 1 });
		await move(bench.baseline, baselineMs + HOUR_MS);
		expect(await run()).toMatchObject({ sent: 0 });
		expect(bench.post.given).toHaveLength(1);
		later(MINUTE_MS);
		const { participantId } = bench.person;
		const details = { name: 'Anna Sample', email: 'right@people.example' };
		const sealed = await bench.keys.folder.encrypt(participantId, JSON.stringify(details));
		await inTransaction(async (tx) => {
			await tx
				.update(contact)
				.set({ sealed, updatedAt: new Date(bench.clock.now()) })
				.where(eq(contact.participantId, participantId));
			await renewFailedMail(tx, bench.clock, bench.setting, participantId);
		});
		expect(await run()).toMatchObject({ sent: 1 });
		expect(bench.post.given[1]?.to).toBe('right@people.example');
		expect((await bench.post.read())[1]?.subject).toMatch(/^Your visit: /);
	});
});

describe('an erased person', () => {
	it('gets no mail and stops nobody else’s', async () => {
		await invite();
		await bench.keys.folder.destroyKey(bench.person.participantId);
		expect(await run()).toMatchObject({ failed: 1, sent: 0 });
		expect(bench.post.given).toEqual([]);
	});
});
