import { computeWilsonInterval } from '../../statistics/wilson-interval.ts';
import type { RuleOutcome } from './rule-experiment.ts';

/** A share of simulated people or blocks with its 95 % interval. */
export interface SimulatedShare {
	readonly share: number;
	readonly low: number;
	readonly high: number;
	readonly count: number;
	readonly of: number;
}

/** Trials until something happened, of those to whom it did. */
export interface SimulatedTrials {
	readonly median: number;
	readonly quarter: number;
	readonly threeQuarters: number;
	readonly people: number;
}

/** What the rule did with one value of the setting; null: nothing of it was seen. */
export interface RulePoint {
	readonly value: number;
	readonly people: number;
	/** Blocks in which the offer became another though nothing had changed. */
	readonly falseChange: SimulatedShare | null;
	/** People who do not adapt and passed the first step. */
	readonly falseStep: SimulatedShare | null;
	readonly escaped: SimulatedShare | null;
	readonly escapeTrials: SimulatedTrials | null;
	readonly followed: SimulatedShare | null;
	readonly followTrials: SimulatedTrials | null;
	/** Decisions for which somebody has to look, or the fallback runs. */
	readonly holds: SimulatedShare | null;
}

/**
 * What simulated people say about a rule, value by value; the order of the outcomes does not matter.
 *
 * Units:   shares with Wilson intervals at 95 %; trials as median and quartiles.
 * Source:  Wilson 1927; see statistics/wilson-interval.ts. Accuracy: rule-experiment.test.ts.
 */
export function summariseRule(
	values: readonly number[],
	outcomes: readonly RuleOutcome[],
	aims: { readonly region: boolean; readonly shift: boolean }
): RulePoint[] {
	return values.map((value) => {
		const own = outcomes.filter((outcome) => outcome.value === value);
		const total = (pick: (outcome: RuleOutcome) => number) =>
			own.reduce((sum, outcome) => sum + pick(outcome), 0);
		const escapes = own.flatMap(({ escapeTrials }) => escapeTrials ?? []);
		const follows = own.flatMap(({ followTrials }) => followTrials ?? []);
		return {
			...{ value, people: own.length },
			falseChange: shareOf(
				total(({ steady }) => steady?.changed ?? 0),
				total(({ steady }) => steady?.blocks ?? 0)
			),
			falseStep: shareOf(
				total(({ unmoved }) => unmoved?.passed ?? 0),
				total(({ unmoved }) => unmoved?.people ?? 0)
			),
			escaped: aims.region ? shareOf(escapes.length, own.length) : null,
			escapeTrials: describeTrials(escapes),
			followed: aims.shift ? shareOf(follows.length, own.length) : null,
			followTrials: describeTrials(follows),
			holds: shareOf(
				total(({ holds }) => holds),
				total(({ decisions }) => decisions)
			)
		};
	});
}

function shareOf(count: number, of: number): SimulatedShare | null {
	if (of === 0) return null;
	const { lower, upper } = computeWilsonInterval({
		...{ successCount: count, trialCount: of, level: 0.95 }
	});
	return { share: count / of, low: lower, high: upper, count, of };
}

function describeTrials(trials: readonly number[]): SimulatedTrials | null {
	if (trials.length === 0) return null;
	const sorted = trials.toSorted((a, b) => a - b);
	const at = (share: number) => {
		const place = share * (sorted.length - 1);
		const [low, high] = [sorted[Math.floor(place)] ?? 0, sorted[Math.ceil(place)] ?? 0];
		return low + (high - low) * (place - Math.floor(place));
	};
	return { median: at(0.5), quarter: at(0.25), threeQuarters: at(0.75), people: trials.length };
}
