import { CompactEncrypt, CompactSign, importJWK, type JWK } from 'jose';
import { canonicalJson } from '$lib/server/record/canonical-json';
import type { SigningKey } from '$lib/server/keys/signing-key';

/** What a rig needs to run one block, and to refuse it when it is not meant for it. */
export type BundleContent = {
	format: 1;
	/** Study code of the participant, visit and block: who and what this block is for. */
	participant: string;
	visit: number;
	block: number;
	rig: string;
	issuedAt: string;
	/** The rig refuses the block from this instant on. */
	expiresAt: string;
	/** Hash of the frozen protocol and of the rule that chose the block. */
	protocolHash: string;
	ruleHash: string;
	limits: { minutesPerVisit: number; trialsPerVisit: number; variableMax: Record<string, number> };
	/** In the order of the region's coordinates: value = origin + scale · coordinate. */
	variables: { name: string; unit: string; origin: number; scale: number }[];
	/** Unit of levels, offsets and shown noise. */
	resultUnit: string;
	plan: { kind: string; parameters: Record<string, unknown> };
	/** Runs when this block is refused: plain practice of the same length. */
	fallback: { kind: 'practice'; trials: number };
};

/** Size of every signed content in bytes, whatever is inside: length tells nothing. */
export const paddedBytes = 16_384;

/**
 * Signs a block as this server (JWS, EdDSA) and encrypts it to one rig (JWE, ECDH-ES with
 * A256GCM). Every file has the same size.
 *
 * @throws {RangeError} a content larger than the padded size
 */
export async function sealBundle(
	content: BundleContent,
	keys: { signing: SigningKey; rigPublicKey: JWK }
): Promise<string> {
	const payload = pad(canonicalJson(content));
	const signed = await new CompactSign(payload)
		.setProtectedHeader({ alg: keys.signing.alg, kid: keys.signing.kid })
		.sign(keys.signing.privateKey);
	const recipient = await importJWK({ ...keys.rigPublicKey, alg: 'ECDH-ES' }, 'ECDH-ES');
	return new CompactEncrypt(new TextEncoder().encode(signed))
		.setProtectedHeader({ alg: 'ECDH-ES', enc: 'A256GCM', cty: 'JWT' })
		.encrypt(recipient);
}

/** JSON allows blanks at its end: they fill the content up to one size. */
function pad(text: string): Uint8Array {
	const bytes = new TextEncoder().encode(text);
	if (bytes.length > paddedBytes) {
		throw new RangeError(`sealBundle requires at most ${paddedBytes} bytes, got ${bytes.length}`);
	}
	const padded = new Uint8Array(paddedBytes).fill(0x20);
	padded.set(bytes);
	return padded;
}

/** Name of a block's file: study code, visit and block number only. */
export function nameBundle(code: string, visit: number, block: number): string {
	return `${code}-visit-${visit}-block-${block}.jwe`;
}
