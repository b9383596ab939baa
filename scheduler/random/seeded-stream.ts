import { xoroshiro128plusFromState } from 'pure-rand/generator/xoroshiro128plus';
import type { JumpableRandomGenerator } from 'pure-rand/types/JumpableRandomGenerator';
import type { Uint32Stream } from './random-stream.ts';

/** A stream that always gives the same words for the same seed. For simulation, never for allocation. */
export type SeededStream = Uint32Stream & {
	/** Keeps it out of allocation, which takes no stream that says so. */
	readonly purpose: 'simulation';
	/** The state, from which {@link resumeSeededStream} goes on. */
	getState(): readonly number[];
};

/**
 * A stream for simulation.
 *
 * Shapes: seed (whole number) and number of the stream in, stream out. Units: none.
 * Method: xoroshiro128+ of the package pure-rand, seeded through splitmix32; stream k is the k-th
 * jump of 2^64 words ahead, so that streams of one seed never overlap and results do not depend on
 * who computes which.
 * Source: D. Blackman and S. Vigna, ACM TOMS 47 (2021); G. Steele et al., OOPSLA 2014.
 * Accuracy: words of the package; scheduler/random/random-stream.test.ts.
 * @throws RangeError when the seed is no whole number or the stream number is negative
 * @example createSeededStream(20270311, 4).nextUint32()
 */
export function createSeededStream(seed: number, streamNumber = 0): SeededStream {
	if (!Number.isSafeInteger(seed)) throw new RangeError(`seed must be a whole number, got ${seed}`);
	if (!Number.isInteger(streamNumber) || streamNumber < 0) {
		throw new RangeError(`streamNumber must be 0 or more, got ${streamNumber}`);
	}
	const generator = xoroshiro128plusFromState(expandSeed(seed));
	for (let jumps = 0; jumps < streamNumber; jumps += 1) generator.jump();
	return wrap(generator);
}

/**
 * Neighbouring streams of one seed: the same as createSeededStream for each number, with one jump for each
 * instead of all of them.
 *
 * Shapes: seed, first number and count in, that many streams out. Units: none.
 * Accuracy: equal words; scheduler/variability/block-bootstrap.test.ts.
 * @throws RangeError when the seed is no whole number or a number is negative
 */
export function createSeededStreams(seed: number, from: number, count: number): SeededStream[] {
	let current = createSeededStream(seed, from);
	return Array.from({ length: count }, () => {
		const stream = current;
		const next = xoroshiro128plusFromState(stream.getState());
		next.jump();
		current = wrap(next);
		return stream;
	});
}

/** Goes on where a stream's state was taken. */
export function resumeSeededStream(state: readonly number[]): SeededStream {
	return wrap(xoroshiro128plusFromState(state));
}

/**
 * A seed from a text, so that each named thing of a simulation has a stream of its own.
 * Method: 32-bit FNV-1a. @example createSeededStream(seedFromText('TW-004 day 2'))
 */
export function seedFromText(text: string): number {
	let hash = 0x811c9dc5;
	for (const character of text) {
		hash = Math.imul(hash ^ (character.codePointAt(0) ?? 0), 0x01000193);
	}
	return hash >>> 0;
}

function wrap(generator: JumpableRandomGenerator): SeededStream {
	return {
		purpose: 'simulation',
		nextUint32: () => generator.next() >>> 0,
		getState: () => [...generator.getState()]
	};
}

/** Four words from the low 32 and the high bits of a seed. */
function expandSeed(seed: number): number[] {
	let state = (seed | 0) ^ Math.imul(Math.floor(seed / 2 ** 32) | 0, 0x9e3779b9);
	return Array.from({ length: 4 }, () => {
		state = (state + 0x9e3779b9) | 0;
		let word = state ^ (state >>> 16);
		word = Math.imul(word, 0x21f0aaad);
		word = Math.imul(word ^ (word >>> 15), 0x735a2d97);
		return word ^ (word >>> 15);
	});
}
