const MINUTE_MS = 60_000;
const DELAYS_MINUTES = [1, 5, 15, 60, 240];
/** How often a mail is tried at most. */
export const ATTEMPTS_MAX = 16;

export type NextAttempt = { ok: true; atMs: number } | { ok: false; reason: 'too-late' };

/**
 * When a mail that could not be sent is tried again: after 1, 5, 15, 60, then every 240 minutes,
 * each a little longer by chance so that many do not come at once; given up after 16 attempts,
 * which is about two days, or when the visit it is about begins.
 *
 * @param options.jitter a number from 0 to 1 that lengthens the wait by up to a fifth
 */
export function nextAttempt(options: {
	/** Attempts made so far, at least 1. */
	attempts: number;
	nowMs: number;
	visitStartMs?: number | undefined;
	jitter: number;
}): NextAttempt {
	const { attempts, nowMs, visitStartMs, jitter } = options;
	const minutes = DELAYS_MINUTES[Math.min(attempts, DELAYS_MINUTES.length) - 1];
	if (minutes === undefined) throw new RangeError('nextAttempt requires an attempt made before');
	const atMs = Math.round(nowMs + minutes * MINUTE_MS * (1 + 0.2 * jitter));
	const isTooLate = attempts >= ATTEMPTS_MAX || atMs >= (visitStartMs ?? Infinity);
	return isTooLate ? { ok: false, reason: 'too-late' } : { ok: true, atMs };
}
