import { and, asc, eq, inArray } from 'drizzle-orm';
import type { Transaction } from '$lib/server/db/client';
import { outbox } from '$lib/server/db/schema';
import type { VisitToTell } from './load-visit';
import type { MailSetting } from './mail-setting';
import { openMail, type ToldVisit } from './sealed-mail';

type OutboxRow = typeof outbox.$inferSelect;

/** The mails about one visit so far, and what the participant may know from them. */
export interface VisitThread {
	/** Told by a mail that went out, may have gone out, or is going out now. */
	known: ToldVisit | null;
	/** Told by the newest mail that still counts, sent or not. */
	latest: ToldVisit | null;
	/** Rows that wait and certainly have not gone out. */
	unsent: OutboxRow[];
	/** Message-ID of the first mail that may have gone out. */
	firstMessageId: string | null;
	lastStampMs: number;
}

/**
 * Reads and locks the mails about a visit. Whoever is just sending one has marked it first, so that
 * a mail counts here as known or as unsent, never as both.
 */
export async function loadThread(
	tx: Transaction,
	setting: MailSetting,
	{ booking }: VisitToTell
): Promise<VisitThread> {
	const rows = await tx
		.select()
		.from(outbox)
		.where(eq(outbox.bookingId, booking.id))
		.orderBy(asc(outbox.sequence), asc(outbox.createdAt))
		.for('update');
	const counting = rows.filter((row) => !['superseded', 'failed'].includes(row.state));
	const known = rows.filter(mayHaveGone);
	return {
		known: await toldBy(setting, known.at(-1)),
		latest: await toldBy(setting, counting.at(-1)),
		unsent: counting.filter((row) => row.state === 'waiting' && !mayHaveGone(row)),
		firstMessageId: known[0]?.messageId ?? null,
		lastStampMs: Math.max(0, ...rows.map((row) => row.createdAt.getTime()))
	};
}

/** Sent; or tried without an answer; or being sent, or left behind by a process that died over it. */
function mayHaveGone({ state, leaseUntil }: OutboxRow): boolean {
	return state === 'sent' || state === 'unknown' || leaseUntil !== null;
}

/** Marks mails as overtaken: they are never sent. */
export async function supersede(tx: Transaction, rows: OutboxRow[]): Promise<void> {
	if (rows.length === 0) return;
	const ids = rows.map((row) => row.id);
	await tx
		.update(outbox)
		.set({ state: 'superseded' })
		.where(and(inArray(outbox.id, ids), eq(outbox.state, 'waiting')));
}

/** Whole seconds, and later than every stamp before: a calendar takes the newer of two. */
export function nextStampMs(thread: VisitThread, nowMs: number): number {
	const nowSecondMs = Math.floor(nowMs / 1000) * 1000;
	return Math.max(nowSecondMs, thread.lastStampMs + 1000);
}

async function toldBy(setting: MailSetting, row: OutboxRow | undefined): Promise<ToldVisit | null> {
	if (!row?.participantId) return null;
	const opened = await openMail(setting.keys, row.participantId, row.sealed);
	return opened.ok ? opened.mail.told : null;
}
