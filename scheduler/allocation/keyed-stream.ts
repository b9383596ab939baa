import type { CryptographicStream } from './cryptographic-stream.ts';

/** What the engine, which holds no cryptography, is handed. */
export type StreamMeans = {
	/** HMAC-SHA-256 of a message with the secret seed: 32 bytes. */
	authenticate: (message: Uint8Array) => Uint8Array;
	/** Text as UTF-8. */
	encode: (text: string) => Uint8Array;
};

const PREFIX = 'ovalry.allocation-stream.v1\0';
const WORDS_IN_BLOCK = 8;

/**
 * The stream of a name, from a keyed hash in counter mode.
 *
 * Shapes: means and label in, stream out. Units: whole numbers from 0 to 2^32 - 1, read big-endian.
 * Method: block i is HMAC(seed, prefix NUL label NUL i as 8 bytes big-endian), which gives eight words.
 * Streams of different labels are independent.
 * Source: NIST SP 800-108r1, 4.1 (KDF in counter mode).
 * Accuracy: exact; scheduler/allocation/commitment.test.ts.
 * @throws RangeError when the label holds a NUL
 */
export function createKeyedStream(
	{ authenticate, encode }: StreamMeans,
	label: string
): CryptographicStream {
	if (label.includes('\0')) throw new RangeError('A label holds no NUL');
	const start = encode(`${PREFIX}${label}\0`);
	let blockIndex = 0;
	let block: DataView | null = null;
	let word = WORDS_IN_BLOCK;
	const readBlock = () => {
		const message = new Uint8Array(start.length + 8);
		message.set(start);
		const counter = new DataView(message.buffer, start.length);
		counter.setUint32(0, Math.floor(blockIndex / 2 ** 32));
		counter.setUint32(4, blockIndex % 2 ** 32);
		const bytes = authenticate(message);
		blockIndex += 1;
		return new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
	};
	return {
		nextUint32: () => {
			if (word === WORDS_IN_BLOCK || !block) [block, word] = [readBlock(), 0];
			word += 1;
			return block.getUint32(4 * (word - 1));
		}
	};
}
