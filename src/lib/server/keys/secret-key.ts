import { hkdfSync } from 'node:crypto';

const KEY_BYTES = 32;

/** A 256-bit key, as bytes or as the base64url text that the settings hold. */
export type KeyMaterial = Uint8Array | string;

/** @throws RangeError unless the key has exactly 32 bytes. The key itself is never in the message. */
export function keyBytes(key: KeyMaterial): Uint8Array {
	const bytes = typeof key === 'string' ? Buffer.from(key, 'base64url') : key;
	if (bytes.length !== KEY_BYTES) {
		throw new RangeError(`A key needs ${KEY_BYTES} bytes, this one has ${bytes.length}`);
	}
	return bytes;
}

/** A key for one purpose, so that no two uses of the same setting share key bytes (HKDF-SHA-256). */
export function deriveKey(key: KeyMaterial, purpose: string): Uint8Array {
	return new Uint8Array(hkdfSync('sha256', keyBytes(key), new Uint8Array(), purpose, KEY_BYTES));
}
