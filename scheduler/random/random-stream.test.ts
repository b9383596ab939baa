import { describe, expect, it } from 'vitest';
import { computeChiSquareSurvival } from '../statistics/chi-square.ts';
import { computeNormalCdf } from '../statistics/normal.ts';
import { drawBelow, drawNormal, drawOrder, drawUniform } from './random-stream.ts';
import {
	createSeededStream,
	createSeededStreams,
	resumeSeededStream,
	seedFromText
} from './seeded-stream.ts';

function listWords(words: number[]) {
	const left = [...words];
	return { nextUint32: () => left.shift() ?? 0 };
}

describe('whole numbers below a limit', () => {
	it('a word beyond the last whole multiple is drawn anew', () => {
		// 2^32 = 3 * 1431655765 + 1: only the very last word would favour 0.
		expect(drawBelow(listWords([0xffffffff, 5]), 3)).toBe(2);
		expect(drawBelow(listWords([0xfffffffe]), 3)).toBe(2);
		expect(drawBelow(listWords([0xffffffff]), 2 ** 32)).toBe(0xffffffff);
	});

	it('are equally likely', () => {
		const stream = createSeededStream(1);
		const counts = Array.from({ length: 7 }, () => 0);
		for (let i = 0; i < 14_000; i += 1) {
			const drawn = drawBelow(stream, 7);
			counts[drawn] = (counts[drawn] ?? 0) + 1;
		}
		const statistic = counts.reduce((sum, count) => sum + (count - 2000) ** 2 / 2000, 0);
		expect(computeChiSquareSurvival(statistic, 6)).toBeGreaterThan(0.001);
	});

	it.each([0, -1, 1.5, 2 ** 32 + 1, NaN])('limit %d is refused', (limit) => {
		expect(() => drawBelow(createSeededStream(1), limit)).toThrow(RangeError);
	});
});

describe('uniform and normal numbers', () => {
	it('uniform numbers lie in 0 to below 1', () => {
		expect(drawUniform(listWords([0, 0]))).toBe(0);
		expect(drawUniform(listWords([0xffffffff, 0xffffffff]))).toBe(1 - 2 ** -53);
	});

	it('normal numbers fill the classes of the normal distribution evenly', () => {
		const stream = createSeededStream(2);
		const counts = Array.from({ length: 20 }, () => 0);
		for (let i = 0; i < 20_000; i += 1) {
			const drawn = Math.floor(computeNormalCdf(drawNormal(stream)) * 20);
			counts[drawn] = (counts[drawn] ?? 0) + 1;
		}
		const statistic = counts.reduce((sum, count) => sum + (count - 1000) ** 2 / 1000, 0);
		expect(computeChiSquareSurvival(statistic, 19)).toBeGreaterThan(0.001);
	});

	it('an order holds every item once, and every order comes up', () => {
		const stream = createSeededStream(3);
		const orders = Array.from({ length: 200 }, () => drawOrder(stream, ['a', 'b', 'c']).join(''));
		expect(new Set(orders)).toEqual(new Set(['abc', 'acb', 'bac', 'bca', 'cab', 'cba']));
	});
});

describe('seeded streams', () => {
	const listFirst = (seed: number, stream = 0) => {
		const words = createSeededStream(seed, stream);
		return Array.from({ length: 50 }, () => words.nextUint32());
	};

	it('the same seed gives the same words, another seed or stream others', () => {
		expect(listFirst(7)).toEqual(listFirst(7));
		const all = [
			listFirst(7),
			listFirst(8),
			listFirst(7, 1),
			listFirst(7, 2),
			listFirst(7 + 2 ** 32)
		];
		expect(new Set(all.flat()).size).toBe(250);
	});

	it('neighbouring seeds do not begin alike', () => {
		const firsts = Array.from({ length: 1000 }, (_, seed) => listFirst(seed)[0] ?? 0);
		const high = firsts.filter((word) => word >= 2 ** 31).length;
		// Within four standard errors of one half.
		expect(Math.abs(high - 500)).toBeLessThan(4 * Math.sqrt(250));
	});

	it('replicates come out the same, however many workers share them and in whatever order', () => {
		const replicate = (stream: ReturnType<typeof createSeededStream>) =>
			drawNormal(stream) + drawNormal(stream);
		const alone = createSeededStreams(11, 0, 24).map(replicate);
		for (const workerCount of [2, 3, 7]) {
			const results = new Array<number>(24).fill(Number.NaN);
			for (let worker = workerCount - 1; worker >= 0; worker -= 1)
				for (let i = worker; i < 24; i += workerCount)
					results[i] = replicate(createSeededStream(11, i));
			expect(results).toEqual(alone);
		}
		const halves = [createSeededStreams(11, 12, 12), createSeededStreams(11, 0, 12)];
		expect([...(halves[1] ?? []), ...(halves[0] ?? [])].map(replicate)).toEqual(alone);
	});

	it('goes on from its state', () => {
		const stream = createSeededStream(9);
		stream.nextUint32();
		const resumed = resumeSeededStream(stream.getState());
		expect([resumed.nextUint32(), resumed.nextUint32()]).toEqual([
			stream.nextUint32(),
			stream.nextUint32()
		]);
	});

	it('names give seeds of their own', () => {
		// FNV-1a of the published test vectors.
		expect(seedFromText('')).toBe(0x811c9dc5);
		expect(seedFromText('a')).toBe(0xe40c292c);
		expect(seedFromText('foobar')).toBe(0xbf9cf968);
	});

	it.each([0.5, NaN, Infinity])('seed %d is refused', (seed) => {
		expect(() => createSeededStream(seed)).toThrow(RangeError);
	});
});
