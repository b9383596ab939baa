import { createHash } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { hashLinkToken, makeLinkToken } from './mail-link';

describe('link token', () => {
	it('is 256 random bits in 43 characters that need no escaping', () => {
		const tokens = Array.from({ length: 100 }, () => makeLinkToken().token);
		expect(new Set(tokens).size).toBe(100);
		expect(tokens.every((token) => /^[A-Za-z0-9_-]{43}$/.test(token))).toBe(true);
	});

	it('is found again by SHA-256 of its text', () => {
		const { token, tokenHash } = makeLinkToken();
		expect(hashLinkToken(token)).toEqual(tokenHash);
		expect(Buffer.from(tokenHash).toString('hex')).toBe(
			createHash('sha256').update(token).digest('hex')
		);
	});

	it.each(['', 'short', 'x'.repeat(44), `${'x'.repeat(42)}/`])('is never "%s"', (text) => {
		expect(hashLinkToken(text)).toBeUndefined();
	});
});
