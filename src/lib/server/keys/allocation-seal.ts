import { createHash, randomBytes } from 'node:crypto';
import { writeCommitmentText } from '$scheduler/allocation/commitment';
import { openBox, sealBox } from './authenticated-box';
import { deriveKey, type KeyMaterial } from './secret-key';

export { createAllocationStream, type AllocationStream } from './allocation-stream';

const SECRET_BYTES = 32;

/** What an allocation list follows from: 256 random bits, and a nonce that hides them. */
export interface AllocationSecret {
	seed: Uint8Array;
	nonce: Uint8Array;
}

export interface SealedAllocation {
	/** Encrypted seed and nonce, bound to this study. */
	sealed: Uint8Array;
	/** Shown at sealing and checked at unblinding; tells nothing about the seed. Hex, 64 characters. */
	commitment: string;
}

/** Draws a new seed and nonce from the operating system and seals them for one study. */
export function sealNewAllocation(key: KeyMaterial, studyId: string): SealedAllocation {
	return sealAllocation(key, studyId, {
		seed: randomBytes(SECRET_BYTES),
		nonce: randomBytes(SECRET_BYTES)
	});
}

/** Seals a given secret: for imports, and for demonstrations that must repeat. */
export function sealAllocation(
	key: KeyMaterial,
	studyId: string,
	secret: AllocationSecret
): SealedAllocation {
	const bytes = Buffer.concat([checked(secret.seed), checked(secret.nonce)]);
	return {
		sealed: sealBox(sealingKey(key), bytes, place(studyId)),
		commitment: commitmentOf(secret)
	};
}

/**
 * @throws Error when the key, the study or the bytes do not fit, or the commitment differs.
 */
export function openAllocation(
	key: KeyMaterial,
	studyId: string,
	sealed: SealedAllocation
): AllocationSecret {
	const bytes = openBox(sealingKey(key), sealed.sealed, place(studyId));
	if (bytes?.length !== 2 * SECRET_BYTES) {
		throw new Error(
			'The sealed allocation does not open: OVALRY_ALLOCATION_KEY is not the one it was sealed with, or it was altered.'
		);
	}
	const secret = { seed: bytes.slice(0, SECRET_BYTES), nonce: bytes.slice(SECRET_BYTES) };
	if (commitmentOf(secret) === sealed.commitment) return secret;
	throw new Error('The sealed allocation does not match the commitment that was shown for it.');
}

/**
 * SHA-256 over a text anybody can rebuild once seed and nonce are made public:
 * three lines, each ended by a line feed, hex in lower case.
 */
export function commitmentOf(secret: AllocationSecret): string {
	const hex = (bytes: Uint8Array) => Buffer.from(checked(bytes)).toString('hex');
	const { seed, nonce } = secret;
	const text = writeCommitmentText({ seedHex: hex(seed), nonceHex: hex(nonce) });
	return createHash('sha256').update(text, 'utf8').digest('hex');
}

function sealingKey(key: KeyMaterial): Uint8Array {
	return deriveKey(key, 'ovalry.allocation-sealing.v1');
}

function place(studyId: string): string {
	return `ovalry.allocation.v1:${studyId}`;
}

function checked(bytes: Uint8Array): Uint8Array {
	if (bytes.length === SECRET_BYTES) return bytes;
	throw new RangeError(`Seed and nonce have ${SECRET_BYTES} bytes each, this has ${bytes.length}`);
}
