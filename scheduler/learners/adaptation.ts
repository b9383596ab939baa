import { computeRetainedShare } from './forgetting.ts';
import type { Adaptation } from './redundant-traits.ts';

/** Adaptation to each result, in the unit of the result; `fast` stays 0 with one rate. */
export interface AdaptationState {
	readonly fast: readonly number[];
	readonly slow: readonly number[];
}

export function startAdaptation(resultCount: number): AdaptationState {
	const none = Array.from({ length: resultCount }, () => 0);
	return { fast: none, slow: none };
}

export function sumAdaptation({ fast, slow }: AdaptationState): number[] {
	return fast.map((value, i) => value + (slow[i] ?? 0));
}

/** One error later: x' = a·x + b·e for each process and each result. */
export function adapt(
	adaptation: Adaptation,
	{ fast, slow }: AdaptationState,
	errors: readonly number[]
): AdaptationState {
	const step = (values: readonly number[], retention: number, rate: number) =>
		values.map((value, i) => retention * value + rate * (errors[i] ?? 0));
	if (adaptation.kind === 'single-rate')
		return { fast, slow: step(slow, adaptation.retention, adaptation.rate) };
	return {
		fast: step(fast, adaptation.fastRetention, adaptation.fastRate),
		slow: step(slow, adaptation.slowRetention, adaptation.slowRate)
	};
}

/** What is left of it after hours without a trial. */
export function forget(
	adaptation: Adaptation,
	{ fast, slow }: AdaptationState,
	gapHours: number
): AdaptationState {
	const keep = (values: readonly number[], share: number) => values.map((value) => value * share);
	if (adaptation.kind === 'single-rate')
		return { fast, slow: keep(slow, computeRetainedShare(adaptation.forgetting, gapHours)) };
	return {
		fast: keep(fast, computeRetainedShare(adaptation.fastForgetting, gapHours)),
		slow: keep(slow, computeRetainedShare(adaptation.slowForgetting, gapHours))
	};
}
