import { drawBelow } from '../random/random-stream.ts';
import type { CryptographicStream } from './cryptographic-stream.ts';
import { drawWithProbability } from './draw-with-probability.ts';

export const IMBALANCE_MEASURES = ['range', 'variance', 'sd'] as const;
export type ImbalanceMeasure = (typeof IMBALANCE_MEASURES)[number];

/** What is known of a person: a value for each factor. */
export type Traits = Readonly<Record<string, string>>;

export type MinimisationRequest = {
	armCount: number;
	/** People allocated so far; arms are numbered from 0. */
	previous: readonly { traits: Traits; arm: number }[];
	newcomer: Traits;
	/** Factors that count, and how much. */
	weights: Readonly<Record<string, number>>;
	measure: ImbalanceMeasure;
	/** Places each arm shall have for each of the others; equal when left out. */
	ratio?: readonly number[];
};

/**
 * Imbalance that would be there if the newcomer joined each arm.
 *
 * Shapes: people so far and newcomer in, one score an arm out. Units: people (variance: people²),
 * weighted.
 * Method: for each factor, the counts of the newcomer's value in each arm with the newcomer added;
 * their range, variance or deviation, weighted and summed. With a ratio, counts are divided by it.
 * Source: S. Pocock and R. Simon, Biometrics 31 (1975).
 * Accuracy: exact; scheduler/allocation/minimisation.test.ts, case minimisation-score.
 * @throws RangeError when an arm does not exist, a weight is negative or a value is missing
 */
export function scoreArms(request: MinimisationRequest): number[] {
	requireRequest(request);
	const { armCount, weights, measure } = request;
	const ratio = request.ratio ?? Array.from({ length: armCount }, () => 1);
	const counts = Object.keys(weights).map((factor) => countAlike(request, factor));
	return ratio.map((_, arm) =>
		Object.values(weights).reduce((sum, weight, f) => {
			const shares = ratio.map(
				(places, k) => ((counts[f]?.[k] ?? 0) + (k === arm ? 1 : 0)) / places
			);
			return sum + weight * measureSpread(shares, measure);
		}, 0)
	);
}

/** Arms with the least score, in order. */
export function listPreferred(scores: readonly number[]): number[] {
	const least = Math.min(...scores);
	const tolerance = 1e-9 * Math.max(1, Math.abs(least));
	return scores.flatMap((score, arm) => (score <= least + tolerance ? [arm] : []));
}

/**
 * Draws the newcomer's arm: with the probability `certainty` one of those with the least imbalance,
 * else one of the others.
 *
 * Shapes: request, certainty and stream in, arm out. Units: none.
 * Method: minimisation with a random element; ties are drawn, each as likely; when all arms tie each
 * is as likely. With a ratio, draws among several arms follow it.
 * Source: S. Pocock and R. Simon, Biometrics 31 (1975); certainty 0.8 by method sheet E.
 * Accuracy: exact to 2^-53; scheduler/allocation/minimisation.test.ts.
 * @throws RangeError as {@link scoreArms} does, and when certainty is not in 0 to 1
 */
export function drawMinimisedArm(
	request: MinimisationRequest & { certainty: number },
	stream: CryptographicStream
): { arm: number; scores: number[]; preferred: number[]; followed: boolean } {
	const scores = scoreArms(request);
	const preferred = listPreferred(scores);
	const others = scores.flatMap((_, arm) => (preferred.includes(arm) ? [] : [arm]));
	const followed = others.length === 0 || drawWithProbability(stream, request.certainty);
	const arm = drawByRatio(stream, followed ? preferred : others, request.ratio);
	return { arm, scores, preferred, followed };
}

function drawByRatio(
	stream: CryptographicStream,
	arms: readonly number[],
	ratio: readonly number[] | undefined
): number {
	const tickets = arms.flatMap((arm) => Array.from({ length: ratio?.[arm] ?? 1 }, () => arm));
	const drawn = tickets[drawBelow(stream, tickets.length)];
	if (drawn === undefined) throw new RangeError('there is no arm to draw from');
	return drawn;
}

/** People of each arm who share the newcomer's value of a factor. */
function countAlike(
	{ armCount, previous, newcomer }: MinimisationRequest,
	factor: string
): number[] {
	const counts = Array.from({ length: armCount }, () => 0);
	for (const { traits, arm } of previous)
		if (traits[factor] === newcomer[factor]) counts[arm] = (counts[arm] ?? 0) + 1;
	return counts;
}

function measureSpread(values: readonly number[], measure: ImbalanceMeasure): number {
	if (measure === 'range') return Math.max(...values) - Math.min(...values);
	const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
	const square = values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
	const variance = square / (values.length - 1);
	return measure === 'variance' ? variance : Math.sqrt(variance);
}

function requireRequest(request: MinimisationRequest): void {
	const { armCount, previous, newcomer, weights, ratio } = request;
	if (!Number.isInteger(armCount) || armCount < 2)
		throw new RangeError(`armCount must be a whole number from 2, got ${armCount}`);
	if (ratio && (ratio.length !== armCount || !ratio.every((r) => Number.isInteger(r) && r > 0)))
		throw new RangeError('the ratio needs a whole number from 1 for each arm');
	if (Object.keys(weights).length === 0) throw new RangeError('there must be at least one factor');
	for (const [factor, weight] of Object.entries(weights)) {
		if (!(weight >= 0 && weight < Infinity))
			throw new RangeError(`the weight of “${factor}” must be 0 or more, got ${weight}`);
		const missing = [newcomer, ...previous.map(({ traits }) => traits)].findIndex(
			(traits) => traits[factor] === undefined
		);
		if (missing >= 0)
			throw new RangeError(
				`“${factor}” is missing for ${missing === 0 ? 'the newcomer' : `person ${missing}`}`
			);
	}
	const strange = previous.find(({ arm }) => !Number.isInteger(arm) || arm < 0 || arm >= armCount);
	if (strange) throw new RangeError(`there is no arm ${strange.arm} of ${armCount}`);
}
