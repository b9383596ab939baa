import { describe, expect, it } from 'vitest';
import { hmacSha256 } from './hmac-sha256';

const bytes = (hex: string) => Buffer.from(hex, 'hex');

describe('HMAC-SHA-256', () => {
	// RFC 4231, sections 4.2 to 4.4 and 4.7 (test cases 1, 2, 3 and 6)
	it.each([
		[
			'0b'.repeat(20),
			Buffer.from('Hi There'),
			'b0344c61d8db38535ca8afceaf0bf12b881dc200c9833da726e9376c2e32cff7'
		],
		[
			Buffer.from('Jefe').toString('hex'),
			Buffer.from('what do ya want for nothing?'),
			'5bdcc146bf60754e6a042426089575c75a003f089d2739839dec58b964ec3843'
		],
		[
			'aa'.repeat(20),
			bytes('dd'.repeat(50)),
			'773ea91e36800e46854db8ebd09181a72959098b3ef8c122d9635514ced565fe'
		],
		[
			'aa'.repeat(131),
			Buffer.from('Test Using Larger Than Block-Size Key - Hash Key First'),
			'60e431591ee0b67f0d8a26aacbf5b77f8e0bc6213728c5140546040f0ee37f54'
		]
	])('agrees with RFC 4231 for key %s', (key, message, expected) => {
		expect(hmacSha256(bytes(key), message).toString('hex')).toBe(expected);
	});
});
