import { POLICY_DEFAULTS, type PolicySettings } from '../policies/policy-settings.ts';
import { computeBetaTails } from '../statistics/beta-distribution.ts';
import { computeFSurvival, computeFUpperQuantile } from '../statistics/f-distribution.ts';
import { computeNormalCdf, computeNormalSurvival } from '../statistics/normal.ts';
import { computeWilsonLowerBound } from '../statistics/wilson-interval.ts';

/** Plain blocks behind the reference once a person has settled. */
const REFERENCE_BLOCKS = 3;

/**
 * Chance that the dead band calls one plain block of a person who does not change a change.
 *
 * Units:   trials; own SD for the band's wander; share out.
 * Method:  shape and place each pass their quantile by chance; place also where the band allows its mean
 *          less wander than people have (.15 SD, the default): the test's variance is then too small by a
 *          known factor. Changed: beyond the strict limit, or beyond the first twice running.
 * Source:  method sheet D0 (Dead band). Accuracy: independent trials; simulated in false-trigger.test.ts.
 * @throws RangeError when there are too few trials for the test of the means
 * @example computeFalseChange({ band: POLICY_DEFAULTS.band, trialCount: 60, variableCount: 2 }) // .0024
 */
export function computeFalseChange(options: {
	band: PolicySettings['band'];
	trialCount: number;
	variableCount: number;
}): number {
	const { band } = options;
	const beyond = (quantile: number) => {
		const shape = 1 - quantile;
		const place = passPlace(options, 1 - quantile);
		return shape + place - shape * place;
	};
	const [suspect, strict] = [beyond(band.q1), Math.min(beyond(band.q1), beyond(band.q2))];
	return strict + (suspect - strict) * suspect;
}

/** Chance that the means of two blocks differ beyond the limit, with people's usual wander. */
function passPlace(options: Parameters<typeof computeFalseChange>[0], upperTail: number): number {
	const { band, trialCount, variableCount: d } = options;
	if (upperTail <= 0 || upperTail >= 1) return Math.min(1, Math.max(0, upperTail));
	const df2 = trialCount * (REFERENCE_BLOCKS + 1) - 2 - d + 1;
	const variance = (wander: number) => (1 + 1 / REFERENCE_BLOCKS) * (1 / trialCount + wander ** 2);
	const ratio = Math.max(1, variance(POLICY_DEFAULTS.band.wander) / variance(band.wander));
	return computeFSurvival(computeFUpperQuantile(upperTail, d, df2) / ratio, d, df2);
}

/**
 * Chance that a region counts as escaped though the person stays where they are, over all its blocks.
 *
 * Shapes:  stays: shares of trials that hit outside the region without a move; the worst one counts.
 * Method:  binomial tail from the least count whose lower Wilson bound passes the relative escape.
 * Source:  method sheet D2 (relative escape). Accuracy: exact for independent trials.
 * @example computeFalseEscape({ region: POLICY_DEFAULTS.region, stays: [0.1, 0.2] }) // under .001
 */
export function computeFalseEscape(options: {
	region: Pick<PolicySettings['region'], 'relativeEscape' | 'window' | 'z' | 'maxBlocks'>;
	stays: readonly number[];
}): number {
	const { region, stays } = options;
	const chances = stays.map((stay) => {
		const least = findLeastEscapes(region, stay);
		if (least === null) return 0;
		const shape = { a: least, b: region.window - least + 1 };
		const once = least === 0 ? 1 : computeBetaTails(stay, shape).lower;
		return 1 - (1 - once) ** region.maxBlocks;
	});
	return Math.max(0, ...chances);
}

function findLeastEscapes(
	{ relativeEscape, window, z }: { relativeEscape: number; window: number; z: number },
	stay: number
): number | null {
	const level = Math.min(1 - 1e-12, computeNormalCdf(z));
	for (let count = 0; count <= window; count++) {
		const low = computeWilsonLowerBound({ successCount: count, trialCount: window, level });
		if ((low - stay) / (1 - stay) >= relativeEscape) return count;
	}
	return null;
}

/** How often the area (volume) of the ellipsoid seems to have changed though nothing has. */
export interface AreaChange {
	/** Share of pairs of blocks whose areas differ by more than the factor, either way. */
	readonly either: number;
	/** Share in which the later area is less than `fallTo` times the earlier one. */
	readonly falls: number;
}

/**
 * What a rule without a dead band would see in two blocks of a person who does not change.
 *
 * Units:   trials; factors of the area; shares out.
 * Method:  two variables: exact, the ratio of two areas is F with 2(n − 2) and 2(n − 2) degrees of freedom;
 *          else the logarithm is taken as normal, with the variance of a Wishart determinant.
 * Source:  Anderson, An Introduction to Multivariate Statistical Analysis, 7.5 (2√|A| is χ² for two).
 * Accuracy: needs of 60 trials: .61 either way by 1.1, .29 below .9; false-trigger.test.ts.
 * @throws RangeError when there are too few trials
 * @example computeAreaChange({ trialCount: 60, variableCount: 2, factor: 1.1, fallTo: 0.9 })
 */
export function computeAreaChange(options: {
	trialCount: number;
	variableCount: number;
	factor: number;
	fallTo: number;
}): AreaChange {
	const { trialCount, variableCount, factor, fallTo } = options;
	if (trialCount < variableCount + 2) throw new RangeError('an area needs more trials');
	const survival = (ratio: number) => passRatio(ratio, trialCount, variableCount);
	return { either: 2 * survival(factor), falls: survival(1 / fallTo) };
}

function passRatio(ratio: number, trialCount: number, d: number): number {
	if (d === 2) {
		const df = 2 * (trialCount - 2);
		return computeFSurvival(ratio, df, df);
	}
	const terms = Array.from({ length: d }, (_, i) => computeTrigamma((trialCount - 1 - i) / 2));
	const variance = terms.reduce((sum, term) => sum + term, 0) / 2;
	return computeNormalSurvival(Math.log(ratio) / Math.sqrt(variance));
}

/** Second derivative of log Γ, by recurrence and its asymptotic series (Abramowitz and Stegun 6.4.12). */
function computeTrigamma(x: number): number {
	if (x < 10) return 1 / x ** 2 + computeTrigamma(x + 1);
	return 1 / x + 1 / (2 * x ** 2) + 1 / (6 * x ** 3) - 1 / (30 * x ** 5);
}
