import { type Matrix, row } from '../linear-algebra/vector.ts';
import { drawBelow, type Uint32Stream } from '../random/random-stream.ts';
import { createSeededStreams } from '../random/seeded-stream.ts';
import { computeNormalCdf } from '../statistics/normal.ts';
import { computeStudentTQuantile } from '../statistics/student-t.ts';
import { computeStandardDeviation } from './moments.ts';
import { computeQuantile } from './scale-estimates.ts';

/** A number taken from one or more blocks of trials, or why there is none. */
export type BlockMeasure = (
	blocks: readonly Matrix[]
) =>
	{ readonly ok: true; readonly value: number } | { readonly ok: false; readonly reason: string };

export interface BootstrapRequest {
	/** Blocks of trials in their order; each is drawn anew by itself. */
	readonly blocks: readonly Matrix[];
	readonly measure: BlockMeasure;
	readonly seed: number;
	/** Trials that stay together, so that neighbours keep their likeness; 5 by default. */
	readonly blockLength?: number;
}

export interface BootstrapInterval {
	readonly value: number;
	readonly low: number;
	readonly high: number;
	readonly standardError: number;
	readonly level: number;
	readonly replicateCount: number;
	/** Replicates in which the measure had no value. */
	readonly failedCount: number;
}

export type BootstrapResult =
	({ ok: true } & BootstrapInterval) | { ok: false; reason: 'no-value' | 'too-many-without-value' };

const BLOCK_LENGTH = 5;
const REPLICATES = 1000;
const LEVEL = 0.95;
/** Part of the replicates that may have no value. */
const FAILED_SHARE_MAX = 0.1;

/**
 * Interval of any measure of a cloud, for trials that resemble their neighbours.
 *
 * Shapes:  blocks (trials × d each), trials >= block length; result in the unit of the measure.
 * Method:  moving-block bootstrap, 5 trials a block; percentile interval, its tails taken further out for
 *          what runs and few trials make too narrow (see {@link summariseReplicates}). Replicate k has the
 *          k-th stream of the seed, so that the result does not depend on who computes which.
 * Source:  Künsch 1989, Ann Stat 17:1217; Hesterberg 2015, Am Stat 69:371 (expanded percentiles); method
 *          sheet B8; block-bootstrap.test.ts.
 * Accuracy: quantiles of 1000 replicates; coverage at small n in scheduler/CALIBRATION.md.
 * @throws {RangeError} a block of fewer trials than the block length, or a level outside 0 to 1
 * @example bootstrapInterval({ blocks: [trials], measure, seed: 7 })
 */
export function bootstrapInterval(
	request: BootstrapRequest & { readonly replicateCount?: number; readonly level?: number }
): BootstrapResult {
	const { replicateCount = REPLICATES, level = LEVEL } = request;
	const made = request.measure(request.blocks);
	if (!made.ok) return { ok: false, reason: 'no-value' };
	const replicates = drawReplicates(request, 0, replicateCount);
	return summariseReplicates(made.value, replicates, { level, ...shapeOf(request) });
}

/**
 * Values of the measure in the replicates from a number on; null where it has none. Parts computed by
 * different workers join to the same list.
 */
export function drawReplicates(
	request: BootstrapRequest,
	from: number,
	count: number
): (number | null)[] {
	return Array.from(drawResamples(request, from, count), (blocks) => {
		const drawn = request.measure(blocks);
		return drawn.ok && Number.isFinite(drawn.value) ? drawn.value : null;
	});
}

/**
 * The blocks drawn anew, one after another, from a number on; for measures of several values.
 * @throws {RangeError} a block of fewer trials than the block length
 */
export function* drawResamples(
	{ blocks, seed, blockLength = BLOCK_LENGTH }: Omit<BootstrapRequest, 'measure'>,
	from: number,
	count: number
): Generator<readonly Matrix[]> {
	if (blocks.some((trials) => trials.length < blockLength))
		throw new RangeError(`a bootstrap requires at least ${blockLength} trials in each block`);
	for (const stream of createSeededStreams(seed, from, count))
		yield blocks.map((trials) => drawTrials(stream, trials, blockLength));
}

/** What makes the tails of an interval be taken further out. */
export interface ResampleShape {
	/** Trials of the shortest block. */
	readonly trialCount: number;
	readonly blockLength: number;
}

/** Shortest block and length of the runs of a request. */
export function shapeOf(request: Pick<BootstrapRequest, 'blocks' | 'blockLength'>): ResampleShape {
	const { blocks, blockLength = BLOCK_LENGTH } = request;
	return { trialCount: Math.min(...blocks.map((trials) => trials.length)), blockLength };
}

/**
 * The interval from the value as measured and all replicates in their order.
 *
 * Method:  percentiles at Φ(±t·√(n / (n − b))), t the quantile of Student's t with n − 1 degrees of
 *          freedom, n trials in the shortest block, b in a run.
 * @throws {RangeError} a level outside 0 to 1
 */
export function summariseReplicates(
	value: number,
	replicates: readonly (number | null)[],
	{ level = LEVEL, trialCount, blockLength }: ResampleShape & { readonly level?: number }
): BootstrapResult {
	if (!(level > 0 && level < 1)) throw new RangeError(`level must lie in 0 to 1, got ${level}`);
	const values = replicates.filter((replicate) => replicate !== null);
	const failedCount = replicates.length - values.length;
	if (values.length < 2 || failedCount > FAILED_SHARE_MAX * replicates.length)
		return { ok: false, reason: 'too-many-without-value' };
	const tail = findTail(level, trialCount, blockLength);
	return {
		...{ ok: true, value, level, failedCount, replicateCount: replicates.length },
		low: computeQuantile(values, tail),
		high: computeQuantile(values, 1 - tail),
		standardError: computeStandardDeviation(values)
	};
}

/** Share of the replicates that lies beyond each end of the interval. */
function findTail(level: number, n: number, blockLength: number): number {
	if (n <= blockLength || n < 2) return 0;
	const t = computeStudentTQuantile((1 + level) / 2, n - 1);
	return computeNormalCdf(-t * Math.sqrt(n / (n - blockLength)));
}

/** As many trials as there were, in runs that start anywhere. */
function drawTrials(stream: Uint32Stream, trials: Matrix, blockLength: number): Matrix {
	const drawn: Matrix[number][] = [];
	while (drawn.length < trials.length) {
		const start = drawBelow(stream, trials.length - blockLength + 1);
		for (let i = 0; i < blockLength && drawn.length < trials.length; i++)
			drawn.push(row(trials, start + i));
	}
	return drawn;
}
