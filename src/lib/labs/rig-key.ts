/** A rig's public encryption key (RFC 7517): elliptic curve P-256, used with ECDH-ES. */
export type RigPublicKey = { kty: 'EC'; crv: 'P-256'; x: string; y: string };
export type RigKeyFault = 'not-json' | 'private-half' | 'other-kind' | 'damaged';
export type RigKeyAnswer = { ok: true; key: RigPublicKey } | { ok: false; reason: RigKeyFault };

const privateMembers = ['d', 'p', 'q', 'dp', 'dq', 'qi', 'k'];
const coordinatePattern = /^[A-Za-z0-9_-]{43}$/;

/**
 * Reads a pasted public key. The private half must stay on the rig: a text that holds one is
 * refused whole. Whether the point lies on the curve is checked where the key is stored.
 */
export function readRigKey(text: string): RigKeyAnswer {
	const found = parseJson(text);
	if (!found) return { ok: false, reason: 'not-json' };
	const list = found.keys;
	const jwk = Array.isArray(list) && list.length === 1 ? asRecord(list[0]) : found;
	if (!jwk) return { ok: false, reason: 'not-json' };
	if (privateMembers.some((name) => name in jwk)) return { ok: false, reason: 'private-half' };
	if (jwk.kty !== 'EC' || jwk.crv !== 'P-256') return { ok: false, reason: 'other-kind' };
	const { x, y } = jwk;
	if (typeof x !== 'string' || typeof y !== 'string') return { ok: false, reason: 'damaged' };
	if (!coordinatePattern.test(x) || !coordinatePattern.test(y)) {
		return { ok: false, reason: 'damaged' };
	}
	return { ok: true, key: { kty: 'EC', crv: 'P-256', x, y } };
}

/** What is wrong with a pasted key and how to mend it. */
export const rigKeyFaults: Record<RigKeyFault, string> = {
	'not-json':
		'This is no JSON Web Key. Paste the whole text of the public key, from the first { to the last }.',
	'private-half':
		'This holds the private half of the key. Leave that on the rig, take it out of wherever it was copied to, and paste the public half only.',
	'other-kind':
		'This key is of another kind. The rig needs an elliptic curve key on P-256 ("kty": "EC", "crv": "P-256").',
	damaged: 'The key’s x and y are not whole. Copy the text once more.'
};

function parseJson(text: string): Record<string, unknown> | null {
	try {
		return asRecord(JSON.parse(text));
	} catch {
		return null;
	}
}

function asRecord(value: unknown): Record<string, unknown> | null {
	const isRecord = typeof value === 'object' && value !== null && !Array.isArray(value);
	return isRecord ? (value as Record<string, unknown>) : null;
}
