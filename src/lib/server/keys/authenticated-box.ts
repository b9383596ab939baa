import { createCipheriv, createDecipheriv, randomBytes } from 'node:crypto';

const VERSION = 1;
const NONCE_BYTES = 12;
const TAG_BYTES = 16;
const OVERHEAD_BYTES = 1 + NONCE_BYTES + TAG_BYTES;

/**
 * Encrypts bytes so that a change to them, or their use in another place, is noticed.
 *
 * Shape: version byte, 12-byte random nonce, ciphertext, 16-byte tag.
 * Method: AES-256-GCM; `boundTo` names the place and is authenticated, not stored.
 */
export function sealBox(key: Uint8Array, plaintext: Uint8Array, boundTo: string): Uint8Array {
	const nonce = randomBytes(NONCE_BYTES);
	const cipher = createCipheriv('aes-256-gcm', key, nonce);
	cipher.setAAD(Buffer.from(boundTo));
	const body = Buffer.concat([cipher.update(plaintext), cipher.final()]);
	return Uint8Array.from(Buffer.concat([Buffer.of(VERSION), nonce, body, cipher.getAuthTag()]));
}

/** The plaintext of a box, or undefined when key, place or bytes do not fit. */
export function openBox(key: Uint8Array, box: Uint8Array, boundTo: string): Uint8Array | undefined {
	if (box.length < OVERHEAD_BYTES || box[0] !== VERSION) return undefined;
	const nonce = box.subarray(1, 1 + NONCE_BYTES);
	const decipher = createDecipheriv('aes-256-gcm', key, nonce, { authTagLength: TAG_BYTES });
	decipher.setAAD(Buffer.from(boundTo));
	decipher.setAuthTag(box.subarray(box.length - TAG_BYTES));
	const body = box.subarray(1 + NONCE_BYTES, box.length - TAG_BYTES);
	try {
		return Uint8Array.from(Buffer.concat([decipher.update(body), decipher.final()]));
	} catch {
		return undefined;
	}
}
