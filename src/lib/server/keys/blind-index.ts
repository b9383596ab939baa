import { hmacSha256 } from './hmac-sha256';
import { deriveKey, type KeyMaterial } from './secret-key';

/**
 * Answers whether two stored e-mail addresses are the same without storing either.
 *
 * Method: HMAC-SHA-256 of the normalised address under a key of its own; hex, 64 characters.
 * Who has the database but not the key cannot test guesses.
 */
export function createBlindIndex(key: KeyMaterial): (email: string) => string {
	const indexKey = deriveKey(key, 'ovalry.blind-index.v1');
	return (email) => hmacSha256(indexKey, normaliseEmail(email)).toString('hex');
}

/**
 * One spelling for one mailbox: outer space gone, Unicode composed, lower case, domain in ASCII.
 * Dots and tags before the @ are kept: only some providers ignore them.
 */
export function normaliseEmail(email: string): string {
	const text = email.normalize('NFKC').trim().toLowerCase();
	const at = text.lastIndexOf('@');
	if (at < 1 || at === text.length - 1) throw new TypeError('Not an e-mail address');
	const domain = text.slice(at + 1).replace(/\.$/, '');
	return `${text.slice(0, at)}@${asciiDomain(domain)}`;
}

function asciiDomain(domain: string): string {
	try {
		return new URL(`http://${domain}`).hostname || domain;
	} catch {
		return domain;
	}
}
