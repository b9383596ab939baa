import { computeCholesky, solveWithCholesky } from '../linear-algebra/cholesky.ts';
import { combineMatrices, scaleMatrix } from '../linear-algebra/matrix.ts';
import { dot, subtract } from '../linear-algebra/vector.ts';
import { computeChiSquareQuantile } from '../statistics/chi-square.ts';
import { computeFSurvival } from '../statistics/f-distribution.ts';
import { computeCovarianceDistance } from '../variability/covariance-distance.ts';
import type { BlockSummary, ReferenceCloud } from './policy-memory.ts';
import type { PolicySettings } from './policy-settings.ts';

export interface BandFacts {
	/** Affine-invariant distance of the shapes and its two limits. */
	readonly distance: number;
	readonly limit: number;
	readonly limitStrict: number;
	/** p of the Hotelling comparison of the means. */
	readonly pPlace: number;
	/** 0 inside the dead band, 1 beyond its first limit, 2 beyond the strict one. */
	readonly level: 0 | 1 | 2;
}

/**
 * Whether a plain block differs from the reference in shape or place more than blocks do by chance.
 *
 * Method:  affine-invariant distance against √((2/(ν₁−d) + 2/(ν₂−d))·χ²), Hotelling T² of the means with
 *          effective counts; block means may wander by `wander` own SD.
 * Source:  method sheet D0 (Dead band).
 */
export function compareWithReference(
	reference: ReferenceCloud,
	current: Pick<BlockSummary, 'n' | 'mean' | 'cov' | 'r'>,
	band: PolicySettings['band']
): BandFacts {
	const r = (reference.r * reference.n + current.r * current.n) / (reference.n + current.n);
	const shapeShare = (1 - r * r) / (1 + r * r);
	const distance = computeCovarianceDistance(reference.cov, current.cov);
	const limitAt = (quantile: number) =>
		computeDistanceLimit({
			n1: reference.n * shapeShare,
			n2: current.n * shapeShare,
			d: reference.mean.length,
			quantile
		});
	const [limit, limitStrict] = [limitAt(band.q1), limitAt(band.q2)];
	const pPlace = comparePlace(reference, current, { r, wander: band.wander });
	const isBeyond = (bound: number, quantile: number) => distance > bound || pPlace < 1 - quantile;
	const level = isBeyond(limitStrict, band.q2) ? 2 : isBeyond(limit, band.q1) ? 1 : 0;
	return { distance, limit, limitStrict, pPlace, level };
}

function computeDistanceLimit(options: {
	n1: number;
	n2: number;
	d: number;
	quantile: number;
}): number {
	const { n1, n2, d, quantile } = options;
	const spread = 2 / (n1 - 1 - d) + 2 / (n2 - 1 - d);
	return Math.sqrt(spread * computeChiSquareQuantile(quantile, (d * (d + 1)) / 2));
}

/** p of Hotelling's T² between two means. */
function comparePlace(
	reference: ReferenceCloud,
	current: Pick<BlockSummary, 'n' | 'mean' | 'cov'>,
	{ r, wander }: { r: number; wander: number }
): number {
	const d = reference.mean.length;
	const effective = (1 - r) / (1 + r);
	const [n1, n2] = [reference.n * effective, current.n * effective];
	const pooled = scaleMatrix(
		combineMatrices([reference.cov, current.cov], [reference.n - 1, current.n - 1]),
		1 / (reference.n + current.n - 2)
	);
	const factor = computeCholesky(pooled);
	if (!factor.ok) throw new RangeError('compareWithReference requires clouds with a volume');
	const delta = subtract(current.mean, reference.mean);
	const variance = 1 / n1 + 1 / n2 + wander ** 2 * (1 + 1 / reference.blocks);
	const T2 = dot(delta, solveWithCholesky(factor.lower, delta)) / variance;
	const df = n1 + n2 - 2;
	return computeFSurvival(((df - d + 1) / (df * d)) * T2, d, df - d + 1);
}
