import { eq } from 'drizzle-orm';
import { describe, expect, it } from 'vitest';
import { booking, participant, studyPause } from '$lib/server/db/schema';
import { enqueueInvitations } from '$lib/server/invitations/enqueue-invitations';
import { enqueueWithdrawal } from '$lib/server/invitations/enqueue-withdrawal';
import { baselineMs, dayOneMs, HOUR_MS, useMailBench } from '../support/mail-bench';
import { plantedNowMs } from '../support/planted-study';
import { plantBooking, plantParticipant } from '../support/planted-visit';

const { bench, allocate, cancel, inTransaction, invite, move, run, states } = useMailBench();

describe('a cancelled visit', () => {
	it('removes the event that was sent', async () => {
		await invite();
		await run();
		expect(await cancel(bench.baseline)).toEqual({ ok: true, queued: 'cancelled' });
		await run();
		const [first, second] = await bench.post.read();
		expect(second?.method).toBe('CANCEL');
		expect(second?.uid).toBe(first?.uid);
		expect(second?.sequence).toBe(1);
		expect(second?.answerToken).toBeUndefined();
	});

	it('sends nothing when its invitation never left, and the invitation neither', async () => {
		await invite();
		expect(await cancel(bench.baseline)).toEqual({ ok: true, queued: 'nothing' });
		await run();
		expect(bench.post.given).toEqual([]);
		expect(await states()).toEqual(['invitation 0 superseded']);
	});

	it('names the time that was told, not one that never was', async () => {
		await invite();
		await run();
		await move(bench.baseline, baselineMs + HOUR_MS);
		await cancel(bench.baseline);
		await run();
		const mails = await bench.post.read();
		expect(mails.map((mail) => mail.method)).toEqual(['REQUEST', 'CANCEL']);
		expect(mails[1]?.text).toContain('It was at: Wed 10 March 2027, 05:00');
	});
});

describe('withdrawal and pause', () => {
	it('confirms a withdrawal, takes told visits out of the calendar, and sends nothing else', async () => {
		await allocate(plantedNowMs);
		await invite();
		await run();
		bench.post.clear();
		await inTransaction(async (tx) => {
			const { participantId } = bench.person;
			await tx
				.update(participant)
				.set({ state: 'withdrawn', withdrawnAt: new Date(bench.clock.now()) })
				.where(eq(participant.id, participantId));
			await tx
				.update(booking)
				.set({ state: 'cancelled' })
				.where(eq(booking.participantId, participantId));
			const cancelledBookingIds = [bench.baseline, bench.dayOne];
			await enqueueWithdrawal(tx, bench.clock, bench.setting, {
				participantId,
				cancelledBookingIds
			});
		});
		bench.clock.set(dayOneMs);
		await run();
		const mails = await bench.post.read();
		expect(mails.map((mail) => mail.method ?? 'none').sort()).toEqual(['CANCEL', 'none']);
		const confirmation = mails.find((mail) => !mail.method);
		expect(confirmation?.subject).toBe('You have stopped taking part');
		expect(confirmation?.text).toContain('Visit 1: Wed 10 March 2027, 05:00');
		expect(confirmation?.text).not.toContain('Visit 2');
	});

	it('holds invitations while the study is paused and sends them once it is lifted', async () => {
		await invite();
		const pause = {
			studyId: bench.home.studyId,
			reason: 'a rig made a noise',
			pausedAt: new Date()
		};
		await bench.owner.db.insert(studyPause).values(pause);
		expect(await run()).toMatchObject({ sent: 0 });
		await bench.owner.db.delete(studyPause);
		expect(await run()).toMatchObject({ sent: 1 });
	});

	it('holds the invitations of one paused participant only', async () => {
		const other = await plantParticipant(bench.owner.db, bench.keys, bench.home);
		await plantBooking(bench.owner.db, bench.home, {
			participantId: other.participantId,
			visitNumber: 1,
			startMs: baselineMs,
			rigIndex: 1
		});
		await invite();
		await inTransaction((tx) =>
			enqueueInvitations(tx, bench.clock, bench.setting, other.participantId)
		);
		const { participantId } = bench.person;
		const pause = {
			studyId: bench.home.studyId,
			participantId,
			reason: 'ill',
			pausedAt: new Date()
		};
		await bench.owner.db.insert(studyPause).values(pause);
		await run();
		expect(bench.post.given.map((mail) => mail.to)).toEqual([other.email]);
		await bench.owner.db.delete(studyPause);
	});

	it('tells of a cancellation even while the study is paused', async () => {
		await invite();
		await run();
		await bench.owner.db
			.insert(studyPause)
			.values({ studyId: bench.home.studyId, reason: 'a rig made a noise', pausedAt: new Date() });
		await cancel(bench.baseline);
		await run();
		expect((await bench.post.read()).map((mail) => mail.method)).toEqual(['REQUEST', 'CANCEL']);
		await bench.owner.db.delete(studyPause);
	});
});
