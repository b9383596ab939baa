import { entry } from '../linear-algebra/vector.ts';
import type { ShiftRule, ShiftState } from './shift-rule.ts';

/** Learning rates that are tried. */
const RATES = Array.from({ length: 38 }, (_, i) => (3 + i) / 100);
/** χ²(1) at 90 %. */
const PROFILE_90 = 2.705543454095404;
const HOLD_BOUNDS = [12, 30] as const;
/** The set of rates that fit must not span more than this factor. */
const SPAN_MAX = 3;

/** One hold of the fit: the step before it and the errors less bias during it. */
type Hold = ShiftState['fit'][number];

export interface LagFit {
	/** Lower end, best and upper end of the rates that fit. */
	readonly rate: [number, number, number];
	/** Trials after which 90 % is followed, 12 to 30; null: too uncertain, keep what is declared. */
	readonly holdMax: number | null;
}

/**
 * Fits one learning rate b to all holds passed so far and derives the person's own longest hold.
 *
 * Method:  e_i = e₀·(1 − b)^i, e₀ = step + what the hold before left; least squares on a grid
 *          .03 … .40; rates with SSE ≤ min + 2.706·σ²·(1 + r)/(1 − r) fit.
 * Source:  method sheet D3 (Personal H_max); case policy-shift-typical.
 */
export function fitLag(rule: ShiftRule, holds: readonly Hold[]): LagFit {
	const misfits = RATES.map((rate) => computeMisfit(rate, holds));
	const least = Math.min(...misfits);
	const limit = least + (PROFILE_90 * rule.sigma ** 2 * (1 + rule.r)) / (1 - rule.r);
	const fitting = RATES.filter((_, i) => entry(misfits, i) <= limit);
	const low = entry(fitting, 0);
	const high = entry(fitting, fitting.length - 1);
	const best = entry(RATES, misfits.indexOf(least));
	const isSharp =
		high <= SPAN_MAX * low && low > entry(RATES, 0) && high < entry(RATES, RATES.length - 1);
	return { rate: [low, best, high], holdMax: isSharp ? computeHoldMax(best) : null };
}

function computeMisfit(rate: number, holds: readonly Hold[]): number {
	let sum = 0;
	let left = 0;
	for (const { step, errors } of holds) {
		const start = step + left;
		errors.forEach((error, i) => (sum += (error - start * (1 - rate) ** i) ** 2));
		left = start * (1 - rate) ** errors.length;
	}
	return sum;
}

function computeHoldMax(rate: number): number {
	const trials = Math.log(0.1) / Math.log(1 - rate);
	// Rounded first, so that a whole number of trials is not lifted by the last digit.
	const whole = Math.ceil(Math.round(trials * 1e9) / 1e9);
	return Math.min(HOLD_BOUNDS[1], Math.max(HOLD_BOUNDS[0], whole));
}
