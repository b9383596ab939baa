import { createHash } from 'node:crypto';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeChiSquareSurvival } from '../statistics/chi-square.ts';
import { deriveEntry, type PermutedBlockScheme } from './permuted-blocks.ts';

/** SHA-256 of seed, name and counter: a stand-in for the sealed stream. */
function openFrom(seed: string) {
	return (name: string) => {
		let counter = 0;
		return {
			nextUint32: () => {
				counter += 1;
				return createHash('sha256').update(`${seed}|${name}|${counter}`).digest().readUInt32BE(0);
			}
		};
	};
}

const TWO_ARMS: PermutedBlockScheme = {
	arms: [
		{ id: 'a', weight: 1 },
		{ id: 'b', weight: 1 }
	],
	blockSizes: [2, 4, 6]
};
const FOUR_ONLY: PermutedBlockScheme = { ...TWO_ARMS, blockSizes: [4] };

function listEntries(scheme: PermutedBlockScheme, seed: string, count: number, stratum = 'all') {
	const openStream = openFrom(seed);
	return Array.from({ length: count }, (_, index) => {
		return deriveEntry({ scheme, stratum, index, openStream });
	});
}

const randomScheme = fc
	.record({
		weights: fc.array(fc.integer({ min: 1, max: 3 }), { minLength: 2, maxLength: 4 }),
		copies: fc.uniqueArray(fc.integer({ min: 1, max: 3 }), { minLength: 1, maxLength: 3 })
	})
	.map(({ weights, copies }): PermutedBlockScheme => {
		const sum = weights.reduce((a, b) => a + b, 0);
		const arms = weights.map((weight, index) => ({ id: `arm${index}`, weight }));
		return { arms, blockSizes: copies.map((count) => count * sum) };
	});

describe('a sequence of permuted blocks', () => {
	it('every whole block holds exactly its share of each arm, whatever scheme and seed', () => {
		const property = fc.property(randomScheme, fc.string(), (scheme, seed) => {
			const entries = listEntries(scheme, seed, 60);
			const sum = scheme.arms.reduce((total, { weight }) => total + weight, 0);
			for (const block of groupByBlock(entries).filter((one) => one.length === one[0]?.blockSize)) {
				for (const { id, weight } of scheme.arms) {
					const count = block.filter(({ armId }) => armId === id).length;
					expect(count).toBe((weight * block.length) / sum);
				}
			}
		});
		fc.assert(property, { seed: 51, numRuns: 60 });
	});

	it('two equal arms never differ by more than half the largest block', () => {
		for (const seed of ['one', 'two', 'three', 'four']) {
			let difference = 0;
			for (const { armId } of listEntries(TWO_ARMS, seed, 80)) {
				difference += armId === 'a' ? 1 : -1;
				expect(Math.abs(difference)).toBeLessThanOrEqual(3);
			}
		}
	});

	it('an entry is the same whether asked alone, again or after others', () => {
		const entries = listEntries(TWO_ARMS, 'seed', 30);
		for (const index of [29, 0, 17, 17, 3]) {
			const alone = deriveEntry({
				scheme: TWO_ARMS,
				stratum: 'all',
				index,
				openStream: openFrom('seed')
			});
			expect(alone).toEqual(entries[index]);
		}
	});

	it('asks for no stream of a block after the entry', () => {
		const names: string[] = [];
		const open = openFrom('seed');
		const entry = deriveEntry({
			scheme: TWO_ARMS,
			stratum: 'all',
			index: 9,
			openStream: (name) => {
				names.push(name);
				return open(name);
			}
		});
		expect(names).toEqual(
			Array.from({ length: entry.blockNumber + 1 }, (_, block) => JSON.stringify(['all', block]))
		);
	});

	it('strata have sequences of their own', () => {
		const arms = (stratum: string) =>
			listEntries(TWO_ARMS, 'seed', 40, stratum).map(({ armId }) => armId);
		expect(arms('morning')).not.toEqual(arms('afternoon'));
		expect(arms('morning')).toEqual(arms('morning'));
	});

	it('other seeds give other sequences', () => {
		const texts = ['a', 'b', 'c', 'd'].map((seed) =>
			listEntries(TWO_ARMS, seed, 40)
				.map(({ armId }) => armId)
				.join('')
		);
		expect(new Set(texts).size).toBe(4);
	});
});

describe('chances', () => {
	const seeds = Array.from({ length: 3000 }, (_, number) => `seed ${number}`);

	it('the first person is as likely in each arm as its weight says', () => {
		const scheme = {
			arms: [
				{ id: 'a', weight: 2 },
				{ id: 'b', weight: 1 },
				{ id: 'c', weight: 1 }
			],
			blockSizes: [4, 8]
		};
		const firsts = seeds.map((seed) => listEntries(scheme, seed, 1)[0]?.armId ?? '');
		expect(pValueOf(firsts, { a: 0.5, b: 0.25, c: 0.25 })).toBeGreaterThan(0.001);
	});

	it('block sizes are equally likely', () => {
		const sizes = seeds.map((seed) => String(listEntries(TWO_ARMS, seed, 1)[0]?.blockSize));
		expect(pValueOf(sizes, { 2: 1 / 3, 4: 1 / 3, 6: 1 / 3 })).toBeGreaterThan(0.001);
	});

	// Reference case permuted-block-4: 6 distinct blocks, 2.8333 expected correct guesses.
	const blocks = seeds.map((seed) =>
		listEntries(FOUR_ONLY, seed, 4)
			.map(({ armId }) => armId)
			.join('')
	);

	it('the six arrangements of a block of four are equally likely', () => {
		const even = Object.fromEntries([...new Set(blocks)].map((block) => [block, 1 / 6]));
		expect(Object.keys(even)).toHaveLength(6);
		expect(pValueOf(blocks, even)).toBeGreaterThan(0.001);
	});

	it('guessing the arm that is behind is right 2.83 times in a block of four', () => {
		const counts = blocks.map(countGuesses);
		const mean = counts.reduce((sum, count) => sum + count, 0) / counts.length;
		// One block's spread is .69; three standard errors of 3000 blocks.
		expect(Math.abs(mean - 2.8333333333)).toBeLessThan((3 * 0.69) / Math.sqrt(3000));
	});
});

describe("a caller's mistake", () => {
	const one = { id: 'a', weight: 1 };
	it.each([
		['one arm', { arms: [one], blockSizes: [4] }],
		['two arms alike', { arms: [one, one], blockSizes: [4] }],
		['no size', { ...TWO_ARMS, blockSizes: [] }],
		['a size that does not divide', { ...TWO_ARMS, blockSizes: [4, 5] }],
		['a broken weight', { arms: [one, { id: 'b', weight: 0.5 }], blockSizes: [3] }]
	])('%s throws', (_, scheme) => {
		const request = { scheme, stratum: 'all', index: 0, openStream: openFrom('seed') };
		expect(() => deriveEntry(request)).toThrow(RangeError);
	});

	it.each([-1, 0.5, NaN])('index %d throws', (index) => {
		const request = { scheme: TWO_ARMS, stratum: 'all', index, openStream: openFrom('seed') };
		expect(() => deriveEntry(request)).toThrow(RangeError);
	});
});

function groupByBlock<Entry extends { blockNumber: number; blockSize: number }>(entries: Entry[]) {
	const blocks: Entry[][] = [];
	for (const entry of entries) (blocks[entry.blockNumber] ??= []).push(entry);
	return blocks;
}

/** Right guesses of somebody who always names the arm that is behind; a tie is half right. */
function countGuesses(block: string): number {
	let [difference, right] = [0, 0];
	for (const arm of block) {
		if (difference === 0) right += 0.5;
		else if (difference > 0 === (arm === 'b')) right += 1;
		difference += arm === 'a' ? 1 : -1;
	}
	return right;
}

function pValueOf(observed: readonly string[], chances: Record<string, number>): number {
	const statistic = Object.entries(chances).reduce((sum, [name, chance]) => {
		const expected = chance * observed.length;
		return sum + (observed.filter((one) => one === name).length - expected) ** 2 / expected;
	}, 0);
	return computeChiSquareSurvival(statistic, Object.keys(chances).length - 1);
}
