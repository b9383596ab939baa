/** What an allocation follows from, in hexadecimal: 32 bytes each. */
export type AllocationSecret = { seedHex: string; nonceHex: string };

/**
 * The text whose SHA-256 is shown when an allocation is sealed. Anybody can rebuild it once seed and
 * nonce are made public.
 *
 * Shapes: seed and nonce in, text out. Units: three lines, each ended by a line feed, hexadecimal in
 * lower case. Method: commitment by hash; the nonce keeps the seed from being guessed.
 * Accuracy: exact; scheduler/allocation/commitment.test.ts.
 * @throws RangeError when seed or nonce are not 64 hexadecimal digits
 */
export function writeCommitmentText({ seedHex, nonceHex }: AllocationSecret): string {
	const [seed, nonce] = [readHex('seed', seedHex), readHex('nonce', nonceHex)];
	return `ovalry-allocation-commitment v1\nseed ${seed}\nnonce ${nonce}\n`;
}

/**
 * Whether a revealed secret is the one that was committed to.
 *
 * Shapes: commitment and secret in, yes or no out.
 * @param hash SHA-256 of a text as UTF-8, in hexadecimal; the engine itself holds no cryptography
 * @throws RangeError when seed or nonce are not 64 hexadecimal digits
 */
export function isRevealed(
	commitment: string,
	secret: AllocationSecret,
	hash: (text: string) => string
): boolean {
	return hash(writeCommitmentText(secret)).toLowerCase() === commitment.trim().toLowerCase();
}

function readHex(name: string, text: string): string {
	const hex = text.trim().toLowerCase();
	if (!/^[0-9a-f]{64}$/.test(hex))
		throw new RangeError(`the ${name} must be 64 hexadecimal digits, got ${hex.length} characters`);
	return hex;
}
