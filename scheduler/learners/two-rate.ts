import { computeRetainedShare, type Forgetting } from './forgetting.ts';

/** Two processes that share one error; all without a unit. */
export interface TwoRate {
	readonly fastRetention: number;
	readonly fastRate: number;
	readonly slowRetention: number;
	readonly slowRate: number;
}

export interface TwoRateState {
	readonly fast: number;
	readonly slow: number;
}

/** Published values of a reaching study (method sheet C, Two rates). */
export const TWO_RATE_PUBLISHED: TwoRate = {
	fastRetention: 0.59,
	fastRate: 0.21,
	slowRetention: 0.992,
	slowRate: 0.02
};

/** What comes next: a trial under a perturbation, a trial whose error is clamped, or hours without. */
export type TwoRateStep =
	| { readonly kind: 'trial'; readonly perturbation: number }
	| { readonly kind: 'clamp'; readonly error: number }
	| { readonly kind: 'gap'; readonly hours: number };

/**
 * One step of a learner with two rates.
 *
 * Units:   those of the perturbation; gaps in real hours.
 * Method:  e = p − (fast + slow), each process x' = a·x + b·e; a gap keeps each by its own forgetting.
 * Source:  method sheet C (Two rates). Accuracy: two-rate.test.ts, values of the sheet.
 */
export function stepTwoRate(
	rates: TwoRate,
	{ fast, slow }: TwoRateState,
	step: TwoRateStep,
	forgetting: { fast: Forgetting; slow: Forgetting } | null = null
): TwoRateState {
	if (step.kind === 'gap') {
		if (!forgetting) return { fast, slow };
		return {
			fast: fast * computeRetainedShare(forgetting.fast, step.hours),
			slow: slow * computeRetainedShare(forgetting.slow, step.hours)
		};
	}
	const error = step.kind === 'clamp' ? step.error : step.perturbation - fast - slow;
	return {
		fast: rates.fastRetention * fast + rates.fastRate * error,
		slow: rates.slowRetention * slow + rates.slowRate * error
	};
}

/** A whole course; states before the first step and after each. */
export function simulateTwoRate(options: {
	rates: TwoRate;
	steps: readonly TwoRateStep[];
	start?: TwoRateState;
	forgetting?: { fast: Forgetting; slow: Forgetting } | null;
}): TwoRateState[] {
	const { rates, steps, forgetting = null } = options;
	let state = options.start ?? { fast: 0, slow: 0 };
	return [state, ...steps.map((step) => (state = stepTwoRate(rates, state, step, forgetting)))];
}

/**
 * Where the processes settle under one perturbation, and how fast: eigenvalues of the closed loop,
 * the smaller first.
 *
 * Method:  fixed point of x' = A·x + B·(p − x₁ − x₂).
 * Source:  method sheet C; case two-rate-asymptote.
 * @throws {RangeError} processes that never settle
 */
export function computeTwoRateAsymptote(rates: TwoRate, perturbation: number) {
	const { fastRetention: Af, fastRate: Bf, slowRetention: As, slowRate: Bs } = rates;
	const [m11, m12, m21, m22] = [Af - Bf, -Bf, -Bs, As - Bs];
	const determinant = (1 - m11) * (1 - m22) - m12 * m21;
	if (!(Math.abs(determinant) > 1e-15)) throw new RangeError('the processes never settle');
	const fast = (((1 - m22) * Bf + m12 * Bs) / determinant) * perturbation;
	const slow = (((1 - m11) * Bs + m21 * Bf) / determinant) * perturbation;
	const trace = m11 + m22;
	const root = Math.sqrt(Math.max(0, trace ** 2 / 4 - (m11 * m22 - m12 * m21)));
	return { fast, slow, net: fast + slow, eigenvalues: [trace / 2 - root, trace / 2 + root] };
}
