import { createHash, randomBytes } from 'node:crypto';

const TOKEN_PATTERN = /^[A-Za-z0-9_-]{43}$/;

/** A secret for a link in a mail: 256 random bits, of which only the hash is stored. */
export function makeLinkToken(): { token: string; tokenHash: Uint8Array } {
	const token = randomBytes(32).toString('base64url');
	return { token, tokenHash: sha256(token) };
}

/** The hash under which a token is stored, or undefined when the text cannot be a token. */
export function hashLinkToken(token: string): Uint8Array | undefined {
	return TOKEN_PATTERN.test(token) ? sha256(token) : undefined;
}

function sha256(text: string): Uint8Array {
	return new Uint8Array(createHash('sha256').update(text).digest());
}
