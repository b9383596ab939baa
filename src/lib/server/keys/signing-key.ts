import {
	createPrivateKey,
	createPublicKey,
	generateKeyPairSync,
	type KeyObject
} from 'node:crypto';
import { join } from 'node:path';
import { calculateJwkThumbprint, exportJWK, type JWK } from 'jose';
import { openBox, sealBox } from './authenticated-box';
import { readIfThere, writeNewFile } from './key-file';
import { KeyFolderFault } from './person-keys';
import { deriveKey, type KeyMaterial } from './secret-key';

/** The key that signs what this server issues to rigs. */
export interface SigningKey {
	/** For the header of a signature: `{ alg, kid }`. */
	alg: 'EdDSA';
	kid: string;
	privateKey: KeyObject;
	/** The public half that a rig keeps: kty OKP, crv Ed25519, with kid, alg and use. */
	publicJwk: JWK;
}

const PLACE = 'ovalry.signing-key.v1';

/**
 * The server's signing key from the key folder, made there once when there is none.
 *
 * Method: Ed25519; the private half is wrapped with the settings' key. Two processes that start
 * together agree, because only one can create the file.
 * @throws KeyFolderFault when the settings' key does not open it.
 */
export async function loadSigningKey(options: {
	folder: string;
	wrappingKey: KeyMaterial;
}): Promise<SigningKey> {
	const wrapping = deriveKey(options.wrappingKey, 'ovalry.signing-key-wrapping.v1');
	const path = join(options.folder, 'signing.key');
	const wrapped = (await readIfThere(path)) ?? (await makeOnce(path, wrapping));
	const der = openBox(wrapping, wrapped, PLACE);
	if (!der) {
		throw new KeyFolderFault(
			'The signing key does not open: OVALRY_WRAPPING_KEY is not the one this key folder was made with, or the file is damaged.'
		);
	}
	return described(createPrivateKey({ key: Buffer.from(der), format: 'der', type: 'pkcs8' }));
}

async function makeOnce(path: string, wrapping: Uint8Array): Promise<Uint8Array> {
	const { privateKey } = generateKeyPairSync('ed25519');
	const der = privateKey.export({ format: 'der', type: 'pkcs8' });
	await writeNewFile(path, sealBox(wrapping, der, PLACE));
	const stored = await readIfThere(path);
	if (!stored) throw new KeyFolderFault('The signing key was removed while it was being made.');
	return stored;
}

async function described(privateKey: KeyObject): Promise<SigningKey> {
	const bare = await exportJWK(createPublicKey(privateKey));
	const kid = await calculateJwkThumbprint(bare);
	return {
		alg: 'EdDSA',
		kid,
		privateKey,
		publicJwk: { ...bare, kid, alg: 'EdDSA', use: 'sig' }
	};
}
