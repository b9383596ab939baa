import { describe, expect, it } from 'vitest';
import { nextAttempt } from './retry-delay';

const MINUTE_MS = 60_000;
const nowMs = Date.parse('2027-03-11T10:00Z');

describe('next attempt', () => {
	it.each([
		[1, 1],
		[2, 5],
		[3, 15],
		[4, 60],
		[5, 240],
		[9, 240]
	])('comes after attempt %i in %i minutes', (attempts, minutes) => {
		const next = nextAttempt({ attempts, nowMs, firstDueMs: nowMs, jitter: 0 });
		expect(next).toEqual({ ok: true, atMs: nowMs + minutes * MINUTE_MS });
	});

	it('is spread by up to a fifth', () => {
		const next = nextAttempt({ attempts: 5, nowMs, firstDueMs: nowMs, jitter: 1 });
		expect(next).toEqual({ ok: true, atMs: nowMs + 288 * MINUTE_MS });
	});

	it('is given up 48 hours after the mail was due, or when the visit begins', () => {
		const firstDueMs = nowMs - 47 * 60 * MINUTE_MS;
		expect(nextAttempt({ attempts: 5, nowMs, firstDueMs, jitter: 0 })).toEqual({
			ok: false,
			reason: 'too-late'
		});
		const visitStartMs = nowMs + 4 * MINUTE_MS;
		expect(nextAttempt({ attempts: 2, nowMs, firstDueMs: nowMs, visitStartMs, jitter: 0 })).toEqual(
			{ ok: false, reason: 'too-late' }
		);
	});
});
