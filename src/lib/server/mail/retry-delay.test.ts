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
		const next = nextAttempt({ attempts, nowMs, jitter: 0 });
		expect(next).toEqual({ ok: true, atMs: nowMs + minutes * MINUTE_MS });
	});

	it('is spread by up to a fifth', () => {
		const next = nextAttempt({ attempts: 5, nowMs, jitter: 1 });
		expect(next).toEqual({ ok: true, atMs: nowMs + 288 * MINUTE_MS });
	});

	it('is given up after about two days', () => {
		let atMs = nowMs;
		let attempts = 1;
		for (; ; attempts++) {
			const next = nextAttempt({ attempts, nowMs: atMs, jitter: 0.5 });
			if (!next.ok) break;
			atMs = next.atMs;
		}
		expect((atMs - nowMs) / (60 * MINUTE_MS)).toBeGreaterThan(44);
		expect((atMs - nowMs) / (60 * MINUTE_MS)).toBeLessThan(52);
	});

	it('is given up when the visit begins before it', () => {
		const visitStartMs = nowMs + 4 * MINUTE_MS;
		const next = nextAttempt({ attempts: 2, nowMs, visitStartMs, jitter: 0 });
		expect(next).toEqual({ ok: false, reason: 'too-late' });
	});
});
