import { drawBelow } from '../random/random-stream.ts';
import type { CryptographicStream, OpenStream } from './cryptographic-stream.ts';

/** Permuted blocks of random sizes. */
export type PermutedBlockScheme = {
	/** Arms with the whole number of places each has in the smallest possible block: 1 : 1, 2 : 1. */
	arms: readonly { id: string; weight: number }[];
	/** Sizes a block may have, each as likely; multiples of the sum of the weights. */
	blockSizes: readonly number[];
};

export type EntryRequest = {
	scheme: PermutedBlockScheme;
	/** Stratum, or any fixed text when there are none. Strata never share a block. */
	stratum: string;
	/** Which entry of the stratum's sequence, 0 for the first person. */
	index: number;
	/** From the sealed seed: one cryptographic stream for each name. */
	openStream: OpenStream;
};

/** One entry. All but the arm is for those who check the sequence after the study. */
export type AllocationEntry = {
	armId: string;
	/** Block within the stratum, from 0, its size, and the entry's place in it, from 0. */
	blockNumber: number;
	blockSize: number;
	positionInBlock: number;
};

/**
 * One entry of a permuted-block sequence, computed from the seed without making any later one.
 *
 * Shapes: scheme, stratum and index in, entry out. Units: none.
 * Method: every block has a stream of its own (name: JSON of stratum and block number). Its first
 * draw is the size; then places are filled in order, each arm as likely as its places left, until
 * the entry wanted. That makes every arrangement of a block equally likely. Earlier blocks cost one
 * draw each.
 * Source: method sheet E (permuted blocks, random sizes, per stratum).
 * Accuracy: exact counts, no favoured remainder; scheduler/allocation/permuted-blocks.test.ts, case
 * permuted-block-4.
 * @throws RangeError when the scheme is not possible or the index is no whole number from 0
 * @example deriveEntry({ scheme, stratum: 'morning', index: 0, openStream }).armId
 */
export function deriveEntry(request: EntryRequest): AllocationEntry {
	const { scheme, stratum, index, openStream } = request;
	requireScheme(scheme);
	if (!Number.isInteger(index) || index < 0) {
		throw new RangeError(`index must be a whole number from 0, got ${index}`);
	}
	let firstIndex = 0;
	for (let blockNumber = 0; ; blockNumber += 1) {
		const stream = openStream(JSON.stringify([stratum, blockNumber]));
		const blockSize = drawFrom(stream, scheme.blockSizes);
		const positionInBlock = index - firstIndex;
		if (positionInBlock < blockSize) {
			const armId = fillUpTo({ scheme, stream, blockSize, positionInBlock });
			return { armId, blockNumber, blockSize, positionInBlock };
		}
		firstIndex += blockSize;
	}
}

/** Fills a block's places in order and says which arm takes the last of them. */
function fillUpTo(options: {
	scheme: PermutedBlockScheme;
	stream: CryptographicStream;
	blockSize: number;
	positionInBlock: number;
}): string {
	const { scheme, stream, blockSize, positionInBlock } = options;
	const copies = blockSize / sumOfWeights(scheme);
	const left = scheme.arms.map(({ id, weight }) => ({ id, count: weight * copies }));
	for (let place = 0; ; place += 1) {
		let ticket = drawBelow(stream, blockSize - place);
		const arm = left.find(({ count }) => {
			const isDrawn = ticket < count;
			ticket -= count;
			return isDrawn;
		});
		if (!arm) throw new Error('a block has as many places as its arms together');
		arm.count -= 1;
		if (place === positionInBlock) return arm.id;
	}
}

function drawFrom(stream: CryptographicStream, sizes: readonly number[]): number {
	const size = sizes[drawBelow(stream, sizes.length)];
	if (size === undefined) throw new Error('a draw below the count of sizes names one of them');
	return size;
}

function sumOfWeights({ arms }: PermutedBlockScheme): number {
	return arms.reduce((sum, { weight }) => sum + weight, 0);
}

function requireScheme(scheme: PermutedBlockScheme): void {
	const { arms, blockSizes } = scheme;
	const isWhole = (value: number) => Number.isInteger(value) && value > 0;
	if (arms.length < 2) throw new RangeError('a scheme needs at least two arms');
	if (new Set(arms.map(({ id }) => id)).size < arms.length) {
		throw new RangeError('each arm needs an id of its own');
	}
	if (!arms.every(({ weight }) => isWhole(weight))) {
		throw new RangeError('each weight must be a whole number from 1');
	}
	const sum = sumOfWeights(scheme);
	if (blockSizes.length === 0 || !blockSizes.every((size) => isWhole(size) && size % sum === 0)) {
		throw new RangeError(`each block size must be a multiple of ${sum}, the sum of the weights`);
	}
}
