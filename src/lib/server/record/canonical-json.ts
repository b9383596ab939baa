import { createHash } from 'node:crypto';
import canonicalize from 'canonicalize';

/**
 * One text for one value: JSON by RFC 8785 (sorted keys, shortest numbers), so that equal values
 * have equal hashes.
 *
 * @throws {TypeError} a value that JSON cannot hold (NaN, infinity, undefined, function)
 */
export function canonicalJson(value: unknown): string {
	const text = canonicalize(value);
	if (text === undefined) throw new TypeError('canonicalJson requires a JSON value');
	return text;
}

/** SHA-256 of a text or of bytes, hexadecimal. */
export function sha256Hex(content: string | Uint8Array): string {
	return createHash('sha256').update(content).digest('hex');
}
