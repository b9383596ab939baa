import { describe, expect, it } from 'vitest';
import {
	commitmentOf,
	createAllocationStream,
	openAllocation,
	sealAllocation,
	sealNewAllocation
} from './allocation-seal';

const seed = Uint8Array.from({ length: 32 }, (_, i) => i);
const nonce = new Uint8Array(32).fill(255);
const key = new Uint8Array(32).fill(7);
const studyId = '3f0c1f0e-0c76-4a11-9f6c-2f6d3c1b8a55';

describe('allocation stream', () => {
	it('equals the counter stream computed with Python 3 hmac and hashlib', () => {
		const stream = createAllocationStream(seed, 'entry/1');
		expect(Array.from({ length: 10 }, () => stream.nextUint32())).toEqual([
			2949184391, 3802336872, 3119099610, 4267334923, 3289952440, 2706032878, 10945678, 2159134529,
			1249955181, 2812378365
		]);
	});

	it('is spread evenly and differs by label', () => {
		const stream = createAllocationStream(seed, 'spread');
		const counts = new Array<number>(16).fill(0);
		for (let i = 0; i < 16_000; i++) {
			const cell = stream.nextUint32() >>> 28;
			counts[cell] = (counts[cell] ?? 0) + 1;
		}
		const chiSquare = counts.reduce((sum, count) => sum + (count - 1000) ** 2 / 1000, 0);
		expect(chiSquare).toBeLessThan(37.7); // chi-square, 15 degrees of freedom, upper .001
		const other = createAllocationStream(seed, 'spread2').nextUint32();
		expect(other).not.toBe(createAllocationStream(seed, 'spread').nextUint32());
	});

	it('refuses a short seed and a label that could be two', () => {
		expect(() => createAllocationStream(seed.subarray(1), 'a')).toThrow(RangeError);
		expect(() => createAllocationStream(seed, 'a\0b')).toThrow(RangeError);
	});
});

describe('allocation seal', () => {
	it('commits to seed and nonce as SHA-256 of the published text (Python 3 hashlib)', () => {
		expect(commitmentOf({ seed, nonce })).toBe(
			'b9f4ead29c54db8df908209da08a1d6d00d2fc6021e5998e9bc186397d016a5a'
		);
	});

	it('opens for its own study and key only', () => {
		const sealed = sealAllocation(key, studyId, { seed, nonce });
		expect(openAllocation(key, studyId, sealed)).toEqual({ seed, nonce });
		expect(() => openAllocation(key, studyId.replace('3', '4'), sealed)).toThrow(/altered/);
		expect(() => openAllocation(seed, studyId, sealed)).toThrow(/OVALRY_ALLOCATION_KEY/);
	});

	it('notices another commitment and an altered byte', () => {
		const sealed = sealAllocation(key, studyId, { seed, nonce });
		const other = { ...sealed, commitment: '0'.repeat(64) };
		expect(() => openAllocation(key, studyId, other)).toThrow(/commitment/);
		sealed.sealed[20] = (sealed.sealed[20] ?? 0) ^ 1;
		expect(() => openAllocation(key, studyId, sealed)).toThrow(/altered/);
	});

	it('draws a new secret each time and never stores it in the clear', () => {
		const first = sealNewAllocation(key, studyId);
		const second = sealNewAllocation(key, studyId);
		expect(first.commitment).not.toBe(second.commitment);
		const secret = openAllocation(key, studyId, first);
		expect(Buffer.from(first.sealed).includes(Buffer.from(secret.seed))).toBe(false);
	});
});
