import { computeCholesky, logDeterminantFromCholesky } from '../../linear-algebra/cholesky.ts';
import type { Matrix } from '../../linear-algebra/vector.ts';
import { computeStandardDeviation } from '../../variability/moments.ts';

/** What two people of a yoked pair should have alike. */
export interface MatchTraits {
	/** ½·ln|Σ| of the baseline cloud in scaled coordinates. */
	readonly logVolume: number;
	/** Mean absolute result of the baseline, in the unit of the result. */
	readonly meanError: number;
}

/** SDs over all baselines; frozen at the first pairing. */
export interface MatchScales {
	readonly logVolumeSd: number;
	readonly meanErrorSd: number;
}

/**
 * Traits of a baseline.
 *
 * Shapes:  covariance (d × d), scaled. Source: method sheet D5 (Match).
 */
export function describeBaseline(options: {
	covariance: Matrix;
	meanError: number;
}): { ok: true; traits: MatchTraits } | { ok: false; reason: 'singular-cloud' } {
	const factor = computeCholesky(options.covariance);
	if (!factor.ok) return { ok: false, reason: 'singular-cloud' };
	const logVolume = logDeterminantFromCholesky(factor.lower) / 2;
	return { ok: true, traits: { logVolume, meanError: options.meanError } };
}

/**
 * The scales of a study, from every baseline known at the first pairing.
 *
 * Method:  SD with n − 1. A trait that all share does not tell people apart: its SD is taken as 1.
 * @throws {RangeError} fewer than two baselines
 */
export function computeMatchScales(baselines: readonly MatchTraits[]): MatchScales {
	if (baselines.length < 2) throw new RangeError('scales need at least two baselines');
	const spread = (values: number[]) => computeStandardDeviation(values) || 1;
	return {
		logVolumeSd: spread(baselines.map(({ logVolume }) => logVolume)),
		meanErrorSd: spread(baselines.map(({ meanError }) => meanError))
	};
}

/**
 * How unlike two people's baselines are.
 *
 * Method:  √(((V_a − V_b)/s_V)² + ((E_a − E_b)/s_E)²).
 * Source:  method sheet D5. Accuracy: tests/reference/yoking.test.ts (the sheet's prototype).
 */
export function computeMatchDistance(a: MatchTraits, b: MatchTraits, scales: MatchScales): number {
	return Math.hypot(
		(a.logVolume - b.logVolume) / scales.logVolumeSd,
		(a.meanError - b.meanError) / scales.meanErrorSd
	);
}

export interface Candidate {
	readonly code: string;
	readonly traits: MatchTraits;
}

export interface MatchRung {
	readonly code: string;
	readonly distance: number;
}

/** Everybody in order of likeness to a person; ties by code. */
export function rankMatches(
	person: Candidate,
	others: readonly Candidate[],
	scales: MatchScales
): MatchRung[] {
	return others
		.map(({ code, traits }) => ({
			code,
			distance: computeMatchDistance(person.traits, traits, scales)
		}))
		.sort((a, b) => a.distance - b.distance || compareCodes(a.code, b.code));
}

export interface YokedPair {
	readonly partner: string;
	readonly master: string;
	readonly distance: number;
	/** Every master that was free then, the nearest first. */
	readonly ladder: readonly MatchRung[];
}

/**
 * Gives each partner, in the order of arrival, the nearest master that is still free; a pair once made
 * stays.
 *
 * Decision: traits, scales, codes, and who is paired already.
 * Source:  method sheet D5 (nearest, ties by code, frozen).
 */
export function pairInOrder(options: {
	partners: readonly Candidate[];
	masters: readonly Candidate[];
	scales: MatchScales;
	paired?: readonly Pick<YokedPair, 'partner' | 'master'>[];
}): { pairs: YokedPair[]; unpaired: string[] } {
	const { partners, masters, scales, paired = [] } = options;
	const taken = new Set(paired.map(({ master }) => master));
	const known = new Set(paired.map(({ partner }) => partner));
	const unpaired: string[] = [];
	const pairs = partners
		.filter(({ code }) => !known.has(code))
		.flatMap((partner) => {
			const free = masters.filter(({ code }) => !taken.has(code));
			const ladder = rankMatches(partner, free, scales);
			const [nearest] = ladder;
			if (!nearest) {
				unpaired.push(partner.code);
				return [];
			}
			taken.add(nearest.code);
			return [{ partner: partner.code, master: nearest.code, distance: nearest.distance, ladder }];
		});
	return { pairs, unpaired };
}

/** By character, the same on every computer. */
export function compareCodes(a: string, b: string): number {
	return a < b ? -1 : a > b ? 1 : 0;
}
