import { hmacSha256 } from './hmac-sha256';

/** A stream of numbers nobody can foresee without the seed. */
export interface AllocationStream {
	nextUint32(): number;
}

/**
 * Random numbers for allocation from a sealed seed.
 *
 * Units: each number is a whole one from 0 to 2^32 - 1, read big-endian.
 * Method: HMAC-SHA-256 in counter mode; block i is
 * HMAC(seed, "ovalry.allocation-stream.v1" NUL label NUL i as 8 bytes big-endian), which gives
 * eight numbers. Streams of different labels are independent.
 * Source: NIST SP 800-108r1, 4.1 (KDF in counter mode); HMAC checked against RFC 4231.
 * @throws RangeError when the seed has not 32 bytes or the label holds a NUL.
 */
export function createAllocationStream(seed: Uint8Array, label: string): AllocationStream {
	if (seed.length !== 32) throw new RangeError('An allocation seed has 32 bytes');
	if (label.includes('\0')) throw new RangeError('A label holds no NUL');
	const prefix = Buffer.from(`ovalry.allocation-stream.v1\0${label}\0`);
	let blockIndex = 0n;
	let block: Buffer = Buffer.alloc(0);
	let offset = 0;
	return {
		nextUint32() {
			if (offset === block.length) {
				block = hmacSha256(seed, Buffer.concat([prefix, counterBytes(blockIndex)]));
				blockIndex += 1n;
				offset = 0;
			}
			const value = block.readUInt32BE(offset);
			offset += 4;
			return value;
		}
	};
}

function counterBytes(index: bigint): Buffer {
	const bytes = Buffer.alloc(8);
	bytes.writeBigUInt64BE(index);
	return bytes;
}
