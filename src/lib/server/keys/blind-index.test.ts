import { describe, expect, it } from 'vitest';
import { createBlindIndex, normaliseEmail } from './blind-index';

describe('blind index of an e-mail address', () => {
	const index = createBlindIndex(new Uint8Array(32).fill(3));

	it('is the same for spellings of one mailbox', () => {
		expect(index(' Anna.Beck@People.Example ')).toBe(index('anna.beck@people.example'));
		expect(index('a@übung.example')).toBe(index('a@xn--bung-zra.example'));
	});

	it('differs between mailboxes and between keys', () => {
		expect(index('anna.beck@people.example')).not.toBe(index('annabeck@people.example'));
		const other = createBlindIndex(new Uint8Array(32).fill(4));
		expect(index('a@b.example')).not.toBe(other('a@b.example'));
	});

	it('holds nothing of the address', () => {
		expect(index('anna.beck@people.example')).toMatch(/^[0-9a-f]{64}$/);
	});

	it.each(['', 'anna', '@people.example', 'anna@'])('refuses "%s"', (text) => {
		expect(() => normaliseEmail(text)).toThrow(TypeError);
	});
});
