import { bisect } from './smallest-n.ts';
import {
	computePowerWithLosses,
	requireShare,
	type Losses,
	type TwoSampleTest
} from './two-sample-t.ts';

export type RequiredNOptions = TwoSampleTest & {
	effectSize: number;
	/** Wanted power, above alpha and below 1. */
	power: number;
	/** People of group 2 for each of group 1; 1 when left out. */
	ratio?: number;
	/** Losses that the people enrolled must make up for; none when left out. */
	losses?: Losses;
	/** No group 1 larger than this is tried; a million when left out. */
	largestN?: number;
};

export type RequiredN =
	| {
			ok: true;
			/** Whole people to enrol in each group. */
			n1: number;
			n2: number;
			/** The group 1 at which the power is met exactly, before rounding up. */
			exactN1: number;
			/** Power at n1 and n2. */
			power: number;
	  }
	| { ok: false; reason: 'no-effect' | 'beyond-limit' };

/**
 * The smallest groups that reach a power.
 *
 * Shapes: wanted power and assumptions in, people per group out. Units: people.
 * Method: doubling and bisection on group 1, as power rises with it; then the smallest whole n1, with
 * n2 = ceil(ratio n1).
 * Source: method sheet E; pwr::pwr.t.test for the unrounded value.
 * Accuracy: relative 1e-9 of exactN1; tests/reference/two-sample-t-power.test.ts.
 * @throws RangeError when the power is not between alpha and 1, or a share or ratio is out of range
 * @example findRequiredN({ effectSize: 0.5, power: 0.8, alpha: 0.05, sides: 2 }) // n1 64, n2 64
 */
export function findRequiredN(options: RequiredNOptions): RequiredN {
	const { effectSize, power, alpha, sides, ratio = 1, largestN = 1e6 } = options;
	if (!(power > alpha && power < 1)) {
		throw new RangeError(`power must lie between alpha ${alpha} and 1, got ${power}`);
	}
	if (!(ratio > 0 && ratio < Infinity))
		throw new RangeError(`ratio must be positive, got ${ratio}`);
	const losses = options.losses ?? { peopleLossShare: 0, effectLossShare: 0 };
	if (effectSize === 0 || (sides === 1 && effectSize < 0))
		return { ok: false, reason: 'no-effect' };
	const powerAt = (n1: number, n2: number) =>
		computePowerWithLosses({ effectSize, n1, n2, alpha, sides }, losses);
	const stay = 1 - losses.peopleLossShare;
	const smallest = Math.max(2 / stay, 2 / (stay * ratio));
	const isEnough = (n: number) => powerAt(n, n * ratio) >= power;
	let high = smallest;
	while (!isEnough(high)) {
		if (high >= largestN) return { ok: false, reason: 'beyond-limit' };
		high = Math.min(largestN, high * 2);
	}
	const exactN1 = bisect(Math.max(smallest, high / 2), high, isEnough);
	const n1 = Math.max(Math.ceil(exactN1 - 1e-9), Math.ceil(smallest - 1e-9));
	const n2 = Math.ceil(n1 * ratio - 1e-9);
	return { ok: true, n1, n2, exactN1, power: powerAt(n1, n2) };
}

/**
 * People to enrol so that, after losses, enough are left.
 *
 * Shapes: numbers in, whole number out. Units: people.
 * Method: n / (1 - loss), rounded up. Source: method sheet E.
 * Accuracy: exact; scheduler/power/required-n.test.ts.
 * @throws RangeError when the share is not in 0 to below 1 or the count is negative
 * @example computePeopleToEnrol(40, 0.2) // 50
 */
export function computePeopleToEnrol(completersNeeded: number, peopleLossShare: number): number {
	requireShare('peopleLossShare', peopleLossShare);
	if (!(completersNeeded >= 0)) {
		throw new RangeError(`completersNeeded must not be negative, got ${completersNeeded}`);
	}
	return Math.max(0, Math.ceil(completersNeeded / (1 - peopleLossShare) - 1e-9));
}
