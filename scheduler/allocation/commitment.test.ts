import { createHash, createHmac } from 'node:crypto';
import { describe, expect, it } from 'vitest';
import { createSeededStream, type SeededStream } from '../random/seeded-stream.ts';
import { isRevealed, writeCommitmentText } from './commitment.ts';
import type { CryptographicStream } from './cryptographic-stream.ts';
import { createKeyedStream } from './keyed-stream.ts';

const hash = (text: string) => createHash('sha256').update(text, 'utf8').digest('hex');
const secret = { seedHex: '0a'.repeat(32), nonceHex: 'ff'.repeat(32) };

describe('a commitment', () => {
	it('is opened by its own seed and nonce, and by no other', () => {
		const commitment = hash(writeCommitmentText(secret));
		expect(isRevealed(commitment.toUpperCase(), secret, hash)).toBe(true);
		expect(isRevealed(commitment, { ...secret, seedHex: '0b'.repeat(32) }, hash)).toBe(false);
		expect(isRevealed(commitment, { ...secret, nonceHex: 'fe'.repeat(32) }, hash)).toBe(false);
	});

	it('has three lines that anybody can rebuild', () => {
		expect(writeCommitmentText({ ...secret, nonceHex: 'FF'.repeat(32) })).toBe(
			`ovalry-allocation-commitment v1\nseed ${'0a'.repeat(32)}\nnonce ${'ff'.repeat(32)}\n`
		);
	});

	it('refuses what is not 32 bytes in hexadecimal', () => {
		expect(() => writeCommitmentText({ ...secret, seedHex: 'abc' })).toThrow(/seed/);
	});
});

describe('the keyed stream', () => {
	const means = {
		authenticate: (message: Uint8Array) =>
			createHmac('sha256', Buffer.alloc(32, 7)).update(message).digest(),
		encode: (text: string) => Buffer.from(text, 'utf8')
	};

	it('gives the words of HMAC-SHA-256 in counter mode', () => {
		const stream = createKeyedStream(means, 'week é');
		const words = Array.from({ length: 20 }, () => stream.nextUint32());
		const block = (i: number) =>
			means.authenticate(
				Buffer.concat([
					Buffer.from('ovalry.allocation-stream.v1\0week é\0', 'utf8'),
					Buffer.from([0, 0, 0, 0, 0, 0, 0, i])
				])
			);
		expect([words[0], words[7], words[8], words[19]]).toEqual([
			...[block(0).readUInt32BE(0), block(0).readUInt32BE(28)],
			...[block(1).readUInt32BE(0), block(2).readUInt32BE(12)]
		]);
	});

	it('differs by label and refuses a NUL', () => {
		const [a, b] = ['a', 'b'].map((label) => createKeyedStream(means, label).nextUint32());
		expect(a).not.toBe(b);
		expect(() => createKeyedStream(means, 'a\0b')).toThrow(RangeError);
	});
});

it('a stream for simulation is of no type that allocation takes', () => {
	type Fits = SeededStream extends CryptographicStream ? true : false;
	const fits: Fits = false;
	expect(fits).toBe(false);
	expect(createSeededStream(1).purpose).toBe('simulation');
});
