import { mkdtemp, readFile, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { CompactSign, compactVerify, importJWK } from 'jose';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { loadSigningKey } from './signing-key';

const wrappingKey = Buffer.alloc(32, 9).toString('base64url');
let folder = '';
beforeEach(async () => {
	folder = await mkdtemp(join(tmpdir(), 'ovalry-sign-'));
});
afterEach(() => rm(folder, { recursive: true, force: true }));

describe('signing key', () => {
	it('signs what the exported public half verifies', async () => {
		const key = await loadSigningKey({ folder, wrappingKey });
		const token = await new CompactSign(Buffer.from('block'))
			.setProtectedHeader({ alg: key.alg, kid: key.kid })
			.sign(key.privateKey);
		const publicKey = await importJWK(key.publicJwk, 'EdDSA');
		const opened = await compactVerify(token, publicKey);
		expect(Buffer.from(opened.payload).toString()).toBe('block');
		expect(opened.protectedHeader.kid).toBe(key.publicJwk.kid);
	});

	it('is made once, also by two processes that start together', async () => {
		const [first, second] = await Promise.all([
			loadSigningKey({ folder, wrappingKey }),
			loadSigningKey({ folder, wrappingKey })
		]);
		const later = await loadSigningKey({ folder, wrappingKey });
		expect([first.kid, second.kid]).toEqual([later.kid, later.kid]);
	});

	it('exports no private part and stores none in the clear', async () => {
		const key = await loadSigningKey({ folder, wrappingKey });
		expect(Object.keys(key.publicJwk).sort()).toEqual(['alg', 'crv', 'kid', 'kty', 'use', 'x']);
		const stored = await readFile(join(folder, 'signing.key'));
		const der = key.privateKey.export({ format: 'der', type: 'pkcs8' });
		expect(stored.includes(der.subarray(16))).toBe(false);
	});

	it('does not open with another wrapping key', async () => {
		await loadSigningKey({ folder, wrappingKey });
		const opening = loadSigningKey({ folder, wrappingKey: new Uint8Array(32) });
		await expect(opening).rejects.toThrow(/OVALRY_WRAPPING_KEY/);
	});
});
