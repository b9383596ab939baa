import { generateKeyPairSync } from 'node:crypto';
import { expect, test } from 'vitest';
import { readRigKey } from './rig-key';

const pair = generateKeyPairSync('ec', { namedCurve: 'P-256' });
const publicJwk = pair.publicKey.export({ format: 'jwk' });
const privateJwk = pair.privateKey.export({ format: 'jwk' });

test('a public key on P-256 is kept, with nothing but its four members', () => {
	const pasted = JSON.stringify({ ...publicJwk, use: 'enc', note: 'Gull' }, null, 2);
	const { kty, crv, x, y } = publicJwk;
	expect(readRigKey(pasted)).toEqual({ ok: true, key: { kty, crv, x, y } });
});

test('a key set of one is that one', () => {
	expect(readRigKey(JSON.stringify({ keys: [publicJwk] })).ok).toBe(true);
});

test.each([
	['text', 'a key', 'not-json'],
	['a list', '[]', 'not-json'],
	['a private key', JSON.stringify(privateJwk), 'private-half'],
	['a secret', '{"kty":"oct","k":"AAAA"}', 'private-half'],
	['an RSA key', '{"kty":"RSA","n":"AAAA","e":"AQAB"}', 'other-kind'],
	['another curve', '{"kty":"EC","crv":"P-384","x":"A","y":"B"}', 'other-kind'],
	['a cut one', JSON.stringify({ ...publicJwk, y: publicJwk.y?.slice(2) }), 'damaged']
])('%s is refused', (_, text, reason) => {
	expect(readRigKey(text)).toEqual({ ok: false, reason });
});
