/** A source of random 32-bit words, seeded or cryptographic. Each call moves it on. */
export type Uint32Stream = {
	/** A whole number from 0 to 2^32 - 1, each as likely as any other. */
	nextUint32(): number;
};

const WORD_COUNT = 2 ** 32;

/**
 * A whole number from 0 to below a limit, each exactly as likely as any other.
 *
 * Shapes: stream and limit in, number out. Units: none.
 * Method: words beyond the last whole multiple of the limit are rejected, so that no remainder is
 * favoured; fewer than half of the words are.
 * Source: textbook rejection sampling. Accuracy: exact; scheduler/random/random-stream.test.ts.
 * @throws RangeError when the limit is no whole number from 1 to 2^32
 * @example drawBelow(stream, 6) + 1 // a die
 */
export function drawBelow(stream: Uint32Stream, limit: number): number {
	if (!Number.isInteger(limit) || limit < 1 || limit > WORD_COUNT) {
		throw new RangeError(`limit must be a whole number from 1 to 2^32, got ${limit}`);
	}
	const fair = WORD_COUNT - (WORD_COUNT % limit);
	for (;;) {
		const word = stream.nextUint32();
		if (word < fair) return word % limit;
	}
}

/**
 * A number from 0 to below 1 on the grid of 2^-53.
 *
 * Shapes: stream in, number out. Units: none. Method: 53 bits of two words.
 * Accuracy: exact on its grid; scheduler/random/random-stream.test.ts.
 */
export function drawUniform(stream: Uint32Stream): number {
	const high = stream.nextUint32() >>> 5;
	const low = stream.nextUint32() >>> 6;
	return (high * 2 ** 26 + low) / 2 ** 53;
}

/**
 * A standard normal number.
 *
 * Shapes: stream in, number out. Units: standard deviations.
 * Method: polar method; the second number of each pair is thrown away, so that a stream holds no
 * state but its own.
 * Source: G. Marsaglia and T. Bray, SIAM Review 6 (1964).
 * Accuracy: distribution checked by moments and tails; scheduler/random/random-stream.test.ts.
 */
export function drawNormal(stream: Uint32Stream): number {
	for (;;) {
		const u = 2 * drawUniform(stream) - 1;
		const v = 2 * drawUniform(stream) - 1;
		const square = u * u + v * v;
		if (square > 0 && square < 1) return u * Math.sqrt((-2 * Math.log(square)) / square);
	}
}

/** The same items in an order drawn at random, each order equally likely (Fisher-Yates). */
export function drawOrder<Item>(stream: Uint32Stream, items: readonly Item[]): Item[] {
	const left = [...items];
	const order: Item[] = [];
	while (left.length > 0) order.push(...left.splice(drawBelow(stream, left.length), 1));
	return order;
}
