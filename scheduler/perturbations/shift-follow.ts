import { computeMean } from '../variability/moments.ts';
import type { ShiftRule, ShiftState } from './shift-rule.ts';

export interface FollowedShare {
	/** Followed share of the level; 1 while the target is not shifted. */
	readonly share: number;
	/** Its one-sided lower bound. */
	readonly low: number;
	/** Mean error less bias over the trials looked at. */
	readonly meanError: number;
}

const WINDOW_MIN = 8;
const HITS_LOOKED_AT = 10;
/** Probability below which so few hits are not chance. */
const RARE = 0.01;

/**
 * How much of the level the person has followed in the last half of the hold, at least 8 trials.
 *
 * Method:  ρ = 1 − (mean error − bias) / θ, its SE from σ and lag-1 correlation over both the window
 *          and the trials behind the bias.
 * Source:  method sheet D3 (Followed share).
 */
export function computeFollowedShare(rule: ShiftRule, state: ShiftState): FollowedShare {
	const { theta, errors, hold } = state;
	const window = Math.min(errors.length, Math.max(WINDOW_MIN, Math.floor(hold / 2)));
	const meanError = computeMean(errors.slice(-window)) - rule.bias;
	if (theta === 0) return { share: 1, low: 1, meanError };
	const inflation = (1 + rule.r) / (1 - rule.r);
	const counts = 1 / window + (rule.n0 === null ? 0 : 1 / rule.n0);
	const standardError = (rule.sigma * Math.sqrt(inflation * counts)) / Math.abs(theta);
	const share = 1 - meanError / theta;
	return { share, low: share - rule.z * standardError, meanError };
}

/** Whether the last ten trials hit so rarely that the level must be taken back. */
export function isHitRateLost(rule: ShiftRule, state: ShiftState): boolean {
	if (state.hits.length < HITS_LOOKED_AT || state.hold < HITS_LOOKED_AT) return false;
	const hitCount = state.hits.slice(-HITS_LOOKED_AT).filter(Boolean).length;
	return (
		hitCount < HITS_LOOKED_AT * rule.hitMin &&
		probabilityAtMost(hitCount, HITS_LOOKED_AT, rule.hit0) < RARE
	);
}

/** P(at most k of n) for independent trials of probability p. */
function probabilityAtMost(k: number, n: number, p: number): number {
	let sum = 0;
	let choose = 1;
	for (let i = 0; i <= k; i++) {
		sum += choose * p ** i * (1 - p) ** (n - i);
		choose = (choose * (n - i)) / (i + 1);
	}
	return sum;
}
