import { randomInt } from 'node:crypto';
import { and, eq } from 'drizzle-orm';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { outbox } from '$lib/server/db/schema';
import type { KeyFolder } from '$lib/server/keys/person-keys';
import { ATTEMPTS_MAX, nextAttempt } from '$lib/server/mail/retry-delay';
import type { MailSender, SendOutcome } from '$lib/server/mail/send-mail';
import { claimNextMail, type ClaimedMail } from './claim-mail';
import { openMail } from './sealed-mail';
import { sweepOutbox } from './sweep-outbox';

export interface MailRun {
	sent: number;
	retried: number;
	failed: number;
	/** Went out whole without an answer from the server. */
	unknown: number;
}

/** What sending needs: a sender, the people's keys, and a limit so that one run ends. */
export interface MailDesk {
	sender: MailSender;
	keys: KeyFolder;
	/** Most mails in one run. Default 50. */
	limit?: number;
}

/**
 * Sends what is due from the outbox, one mail at a time. Several processes may do so at once.
 *
 * A mail whose fate is unknown is sent again with the same bytes when it carries a calendar event,
 * which a calendar takes as the same message; the confirmation of a withdrawal is not, and stays
 * for the coordinator to see. SMTP cannot promise more.
 */
export async function sendDueMail(db: Database, clock: Clock, desk: MailDesk): Promise<MailRun> {
	const run: MailRun = { sent: 0, retried: 0, failed: 0, unknown: 0 };
	for (let count = 0; count < (desk.limit ?? 50); count++) {
		await sweepOutbox(db, clock.now());
		const mail = await claimNextMail(db, clock);
		if (!mail) break;
		const fate = await tryMail(desk, mail);
		run[await settle(db, clock, mail, fate)] += 1;
	}
	return run;
}

type Fate = SendOutcome | { state: 'permanent'; reason: 'erased' } | { state: 'not-repeated' };

async function tryMail(desk: MailDesk, mail: ClaimedMail): Promise<Fate> {
	if (mail.kind === 'withdrawn' && mail.mayHaveGone) return { state: 'not-repeated' };
	if (!mail.participantId) throw new Error(`Outbox row ${mail.id} names no participant`);
	const opened = await openMail(desk.keys, mail.participantId, mail.sealed);
	if (!opened.ok) return { state: 'permanent', reason: 'erased' };
	return desk.sender.send(opened.mail);
}

type Change = Partial<typeof outbox.$inferInsert> & { state: ClaimedMail['state'] };

/** Writes down what became of an attempt, unless another process has taken the mail over since. */
async function settle(
	db: Database,
	clock: Clock,
	mail: ClaimedMail,
	fate: Fate
): Promise<keyof MailRun> {
	const { change, count } = changeAfter(clock.now(), mail, fate);
	await db
		.update(outbox)
		.set({ ...change, leaseUntil: null })
		.where(and(eq(outbox.id, mail.id), eq(outbox.attempts, mail.attempts)));
	return count;
}

function changeAfter(
	nowMs: number,
	mail: ClaimedMail,
	fate: Fate
): { change: Change; count: keyof MailRun } {
	if (fate.state === 'sent') {
		return { change: { state: 'sent', sentAt: new Date(nowMs), lastError: null }, count: 'sent' };
	}
	if (fate.state === 'not-repeated') {
		return { change: { state: 'unknown', lastError: 'no-answer' }, count: 'unknown' };
	}
	const lastError = fate.reason;
	if (fate.state === 'permanent') {
		if (mail.mayHaveGone) return { change: unknownForGood(lastError), count: 'failed' };
		return { change: { state: 'failed', lastError }, count: 'failed' };
	}
	return changeForLater(nowMs, mail, { lastError, isUnknown: fate.state === 'unknown' });
}

/** It may have arrived, and is not tried again. */
function unknownForGood(lastError: string): Change {
	return { state: 'unknown', lastError, attempts: ATTEMPTS_MAX };
}

function changeForLater(
	nowMs: number,
	mail: ClaimedMail,
	{ lastError, isUnknown }: { lastError: string; isUnknown: boolean }
): { change: Change; count: keyof MailRun } {
	const next = nextAttempt({
		attempts: mail.attempts,
		nowMs,
		visitStartMs: mail.kind === 'cancelled' ? undefined : mail.visitStartMs,
		jitter: randomInt(1000) / 1000
	});
	const mayHaveGone = isUnknown || mail.mayHaveGone;
	if (mayHaveGone && !next.ok) return { change: unknownForGood(lastError), count: 'unknown' };
	if (mayHaveGone && next.ok) {
		return {
			change: { state: 'unknown', lastError, dueAt: new Date(next.atMs) },
			count: 'unknown'
		};
	}
	if (!next.ok) return { change: { state: 'failed', lastError }, count: 'failed' };
	return { change: { state: 'waiting', lastError, dueAt: new Date(next.atMs) }, count: 'retried' };
}
