import { drawNormal, type Uint32Stream } from '../random/random-stream.ts';

/** x' = retention·x + rate·(perturbation − x). Both without a unit. */
export interface SingleRate {
	/** Share of the adaptation kept from trial to trial (a). */
	readonly retention: number;
	/** Share of each error that is learned (b). */
	readonly rate: number;
}

export interface LearnerTrace {
	/** Adaptation before each trial, and after the last: one more than trials. */
	readonly states: readonly number[];
	/** Error of each trial: perturbation less adaptation less motor noise. */
	readonly errors: readonly number[];
}

/**
 * A learner with one rate under any course of a perturbation.
 *
 * Shapes:  perturbations (n); states (n + 1), errors (n).
 * Units:   those of the perturbation.
 * Method:  e = p − x − η, x' = a·x + b·e; η normal with SD `motorSd` from the stream.
 * Source:  method sheet C (Single rate). Accuracy: equals the closed form without noise
 *          (single-rate.test.ts).
 * @throws {RangeError} noise without a stream
 * @example simulateSingleRate({ retention: 1, rate: 0.1, perturbations: [1, 1, 1] }).states[3] // 0.271
 */
export function simulateSingleRate(
	options: SingleRate & {
		perturbations: readonly number[];
		start?: number;
		motorSd?: number;
		stream?: Uint32Stream;
	}
): LearnerTrace {
	const { retention, rate, perturbations, start = 0, motorSd = 0, stream } = options;
	if (motorSd > 0 && !stream) throw new RangeError('motor noise needs a stream');
	const states = [start];
	let x = start;
	const errors = perturbations.map((perturbation) => {
		const noise = motorSd > 0 && stream ? motorSd * drawNormal(stream) : 0;
		const error = perturbation - x - noise;
		x = retention * x + rate * error;
		states.push(x);
		return error;
	});
	return { states, errors };
}

/**
 * Adaptation after n trials of one perturbation p, from none.
 *
 * Method:  b·p/(1 − a + b)·(1 − (a − b)^n). Source: method sheet C.
 */
export function computeSingleRateState({
	retention: a,
	rate: b,
	perturbation,
	trialCount
}: SingleRate & { perturbation: number; trialCount: number }): number {
	return ((b * perturbation) / (1 - a + b)) * (1 - (a - b) ** trialCount);
}

/** Error that is left for good: p·(1 − a)/(1 − a + b). */
export function computeSingleRateResidual({
	retention: a,
	rate: b,
	perturbation
}: SingleRate & { perturbation: number }): number {
	return (perturbation * (1 - a)) / (1 - a + b);
}

/**
 * Trials until a share of what is followed in the end has been followed; not rounded.
 *
 * Method:  ln(1 − share)/ln(a − b). Source: method sheet C (Lag); case follow-lag.
 * @throws {RangeError} a − b outside 0 … 1, or a share outside 0 … 1
 * @example countTrialsToFollow({ retention: 1, rate: 0.109, share: 0.9 }) // 19.95…
 */
export function countTrialsToFollow({
	retention,
	rate,
	share
}: SingleRate & { share: number }): number {
	const kept = retention - rate;
	if (!(kept > 0 && kept < 1)) throw new RangeError('retention − rate must lie between 0 and 1');
	if (!(share > 0 && share < 1)) throw new RangeError('share must lie between 0 and 1');
	return Math.log(1 - share) / Math.log(kept);
}
