import type { CryptographicStream } from '$scheduler/allocation/cryptographic-stream';
import { createKeyedStream } from '$scheduler/allocation/keyed-stream';
import { hmacSha256 } from './hmac-sha256';

/** A stream of numbers nobody can foresee without the seed. */
export type AllocationStream = CryptographicStream;

/**
 * Random numbers for allocation from a sealed seed.
 *
 * Units: each number is a whole one from 0 to 2^32 - 1.
 * Method: see `createKeyedStream`, with HMAC-SHA-256 checked against RFC 4231.
 * @throws RangeError when the seed has not 32 bytes or the label holds a NUL.
 */
export function createAllocationStream(seed: Uint8Array, label: string): AllocationStream {
	if (seed.length !== 32) throw new RangeError('An allocation seed has 32 bytes');
	return createKeyedStream(
		{
			authenticate: (message) => hmacSha256(seed, message),
			encode: (text) => Buffer.from(text, 'utf8')
		},
		label
	);
}
