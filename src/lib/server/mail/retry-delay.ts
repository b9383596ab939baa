const MINUTE_MS = 60_000;
const DELAYS_MINUTES = [1, 5, 15, 60, 240];
const GIVE_UP_AFTER_MS = 48 * 60 * MINUTE_MS;

export type NextAttempt = { ok: true; atMs: number } | { ok: false; reason: 'too-late' };

/**
 * When a mail that could not be sent is tried again: after 1, 5, 15, 60, then every 240 minutes,
 * each a little longer by chance so that many do not come at once; given up after 48 hours, or when
 * the visit it is about begins.
 *
 * @param options.jitter a number from 0 to 1 that lengthens the wait by up to a fifth
 */
export function nextAttempt(options: {
	attempts: number;
	nowMs: number;
	firstDueMs: number;
	visitStartMs?: number | undefined;
	jitter: number;
}): NextAttempt {
	const { attempts, nowMs, firstDueMs, visitStartMs, jitter } = options;
	const index = Math.min(Math.max(attempts, 1), DELAYS_MINUTES.length) - 1;
	const minutes = DELAYS_MINUTES[index] ?? 240;
	const atMs = Math.round(nowMs + minutes * MINUTE_MS * (1 + 0.2 * jitter));
	const lastMs = Math.min(firstDueMs + GIVE_UP_AFTER_MS, visitStartMs ?? Infinity);
	return atMs < lastMs ? { ok: true, atMs } : { ok: false, reason: 'too-late' };
}
