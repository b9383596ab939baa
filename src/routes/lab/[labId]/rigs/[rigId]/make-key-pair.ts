/** A key pair made by this browser, both halves as JSON Web Keys. Nothing of it goes to the server. */
export async function makeKeyPair(): Promise<{ publicText: string; privateText: string }> {
	const { publicKey, privateKey } = await crypto.subtle.generateKey(
		{ name: 'ECDH', namedCurve: 'P-256' },
		true,
		['deriveBits']
	);
	const { kty, crv, x, y } = await crypto.subtle.exportKey('jwk', publicKey);
	const { d } = await crypto.subtle.exportKey('jwk', privateKey);
	const write = (jwk: object) => JSON.stringify(jwk, null, 2);
	return { publicText: write({ kty, crv, x, y }), privateText: write({ kty, crv, x, y, d }) };
}
