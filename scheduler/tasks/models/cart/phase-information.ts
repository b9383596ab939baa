import { drawOrder } from '../../../random/random-stream.ts';
import { createSeededStream } from '../../../random/seeded-stream.ts';

interface Bins {
	/** Equal bins of the phase. */
	readonly phase: number;
	/** Equal bins of the value, from its least to its largest. */
	readonly force: number;
}

/**
 * Mutual information of a phase and a value.
 *
 * Shapes:  two lists of equal length; phases as shares of a turn, 0 to 1.
 * Units:   bits.
 * Method:  plug-in estimate from counts; it is too high where samples are few for the bins, so read it
 *          beside computeInformationFloor.
 * Source:  method sheet A8.
 * @throws {RangeError} lists of different length or without samples
 */
export function computePhaseInformation(
	phases: readonly number[],
	values: readonly number[],
	bins: Bins
): number {
	if (phases.length !== values.length || values.length === 0)
		throw new RangeError('computePhaseInformation requires two lists of equal length, not empty');
	const [low, high] = findRange(values);
	const joint = new Float64Array(bins.phase * bins.force);
	values.forEach((value, i) => {
		const a = toBin(phases[i] ?? 0, bins.phase);
		const b = high > low ? toBin((value - low) / (high - low), bins.force) : 0;
		const place = a * bins.force + b;
		joint[place] = (joint[place] ?? 0) + 1 / values.length;
	});
	const sums = { phase: new Float64Array(bins.phase), force: new Float64Array(bins.force) };
	joint.forEach((share, place) => {
		const [a, b] = [Math.floor(place / bins.force), place % bins.force];
		sums.phase[a] = (sums.phase[a] ?? 0) + share;
		sums.force[b] = (sums.force[b] ?? 0) + share;
	});
	return joint.reduce((sum, share, place) => {
		const [a, b] = [Math.floor(place / bins.force), place % bins.force];
		const alone = (sums.phase[a] ?? 0) * (sums.force[b] ?? 0);
		return share > 0 ? sum + share * Math.log2(share / alone) : sum;
	}, 0);
}

/**
 * What the estimate gives for the same values in random order: its mean over some orders.
 *
 * Decision: lists, bins, seed and count of orders.
 */
export function computeInformationFloor(
	phases: readonly number[],
	values: readonly number[],
	bins: Bins,
	{ seed, orders }: { seed: number; orders: number }
): number {
	const stream = createSeededStream(seed);
	let sum = 0;
	for (let k = 0; k < orders; k++)
		sum += computePhaseInformation(phases, drawOrder(stream, values), bins);
	return sum / orders;
}

function toBin(share: number, count: number): number {
	return Math.min(count - 1, Math.max(0, Math.floor(share * count)));
}

function findRange(values: readonly number[]): [number, number] {
	return values.reduce<[number, number]>(
		([low, high], value) => [Math.min(low, value), Math.max(high, value)],
		[Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY]
	);
}
