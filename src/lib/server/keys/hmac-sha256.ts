import { createHmac } from 'node:crypto';

/** HMAC-SHA-256 (RFC 2104), 32 bytes. */
export function hmacSha256(key: Uint8Array, message: Uint8Array | string): Buffer {
	return createHmac('sha256', key).update(message).digest();
}
