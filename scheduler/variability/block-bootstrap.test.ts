import { describe, expect, it } from 'vitest';
import { drawNormal } from '../random/random-stream.ts';
import { createSeededStream, createSeededStreams } from '../random/seeded-stream.ts';
import {
	bootstrapInterval,
	drawReplicates,
	summariseReplicates,
	type BlockMeasure
} from './block-bootstrap.ts';
import { computeMean } from './moments.ts';
import { tiltedTrials } from '../../tests/support/variability/any-trials.ts';

const meanOfFirst: BlockMeasure = ([trials = []]) => ({
	...{ ok: true, value: computeMean(trials.map(([x = 0]) => x)) }
});

/** Trials whose first variable carries over by this part to the next. */
function correlatedTrials(count: number, carry: number): number[][] {
	const stream = createSeededStream(9);
	let last = 0;
	return Array.from({ length: count }, () => [(last = carry * last + drawNormal(stream)), 0]);
}

describe('bootstrapInterval', () => {
	const shape = { trialCount: 60, blockLength: 5 };
	const request = { blocks: [tiltedTrials(60)], measure: meanOfFirst, seed: 4 };

	it('has about the standard error that theory gives for a mean', () => {
		const independent = { ...request, blocks: [correlatedTrials(200, 0)] };
		const found = bootstrapInterval({ ...independent, replicateCount: 400 });
		expect(found.ok && found.standardError * Math.sqrt(200)).toBeCloseTo(1, 0);
		expect(found.ok && found.low < found.value && found.value < found.high).toBe(true);
	});

	it('is wider for runs of five than for single trials when trials resemble their neighbours', () => {
		const blocks = [correlatedTrials(200, 0.6)];
		const [single, runs] = [1, 5].map((blockLength) =>
			bootstrapInterval({ ...request, blocks, blockLength, replicateCount: 400 })
		);
		const width = (found: typeof runs) => (found?.ok ? found.high - found.low : NaN);
		expect(width(runs)).toBeGreaterThan(1.2 * width(single));
	});

	it('parts computed apart join to the same replicates', () => {
		const parts = [drawReplicates(request, 0, 7), drawReplicates(request, 7, 5)].flat();
		expect(parts).toEqual(drawReplicates(request, 0, 12));
		expect(new Set(parts).size).toBe(12);
	});

	it('draws each block by itself', () => {
		const [first, second] = [
			[[1], [1], [1], [1], [1]],
			[[2], [2], [2], [2], [2], [2]]
		];
		const measure: BlockMeasure = ([a = [], b = []]) => ({
			...{ ok: true, value: 100 * a.length + 10 * b.length + (a[0]?.[0] ?? 0) + (b[0]?.[0] ?? 0) }
		});
		expect(drawReplicates({ blocks: [first, second], measure, seed: 1 }, 0, 3)).toEqual([
			563, 563, 563
		]);
	});

	it('says so when the measure has no value at all, or too often', () => {
		const never: BlockMeasure = () => ({ ok: false, reason: 'none' });
		expect(bootstrapInterval({ ...request, measure: never })).toEqual({
			ok: false,
			reason: 'no-value'
		});
		expect(summariseReplicates(1, [1, 2, null, 3, 4], shape)).toEqual({
			...{ ok: false, reason: 'too-many-without-value' }
		});
		const nearly = summariseReplicates(1, [...Array.from({ length: 19 }, (_, i) => i), null], {
			...shape,
			level: 0.9
		});
		expect(nearly.ok && nearly.failedCount).toBe(1);
	});

	it('refuses blocks shorter than a run', () => {
		expect(() => drawReplicates({ ...request, blocks: [[[1], [2]]] }, 0, 1)).toThrow(RangeError);
	});
});

describe('createSeededStreams', () => {
	it('gives the streams of those numbers', () => {
		const words = (streams: { nextUint32(): number }[]) =>
			streams.map((stream) => [stream.nextUint32(), stream.nextUint32()]);
		const single = [3, 4, 5].map((number) => createSeededStream(77, number));
		expect(words(createSeededStreams(77, 3, 3))).toEqual(words(single));
	});
});
