import { computeNormalQuantile } from '../statistics/normal.ts';
import { requireCount } from './t-power.ts';

/**
 * Simulated replicates needed for a power (or another share) within a half width.
 *
 * Shapes: numbers in, whole number out. Units: shares 0 to 1; replicates.
 * Method: ⌈z² p (1 - p) / h²⌉. Source: method sheet E.
 * Accuracy: exact; tests/reference/power-sheet.test.ts, case mc-replicates.
 * @throws RangeError when p or level is not between 0 and 1, or the half width is not positive
 * @example countReplicates({ p: 0.8, halfWidth: 0.01, level: 0.95 }) // 6147
 */
export function countReplicates(goal: { p: number; halfWidth: number; level: number }): number {
	const { p, halfWidth, level } = goal;
	if (!(p >= 0 && p <= 1)) throw new RangeError(`p must lie in 0 to 1, got ${p}`);
	if (!(halfWidth > 0)) throw new RangeError(`halfWidth must be positive, got ${halfWidth}`);
	if (!(level > 0 && level < 1))
		throw new RangeError(`level must be between 0 and 1, got ${level}`);
	const z = computeNormalQuantile((1 + level) / 2);
	return Math.ceil((z * z * p * (1 - p)) / (halfWidth * halfWidth) - 1e-9);
}

/**
 * How many times more people a design with clusters (or repeated trials) needs.
 *
 * Shapes: numbers in, number out. Units: none.
 * Method: 1 + (m - 1) ICC; with clusters of different sizes m is replaced by their mean (1 + cv²).
 * Source: method sheet E. Accuracy: exact; tests/reference/power-sheet.test.ts, case design-effect.
 * @throws RangeError when a size is below 1 or the correlation is out of range
 * @example computeDesignEffect({ clusterSize: 20, icc: 0.05 }) // 1.95
 */
export function computeDesignEffect(cluster: {
	clusterSize: number;
	icc: number;
	/** Deviation of cluster sizes over their mean; 0 when left out. */
	sizeVariation?: number;
}): number {
	const { clusterSize, icc, sizeVariation = 0 } = cluster;
	requireCount('clusterSize', clusterSize, 1);
	if (!(icc >= 0 && icc <= 1)) throw new RangeError(`icc must lie in 0 to 1, got ${icc}`);
	if (!(sizeVariation >= 0))
		throw new RangeError(`sizeVariation must not be negative, got ${sizeVariation}`);
	return 1 + (clusterSize * (1 + sizeVariation * sizeVariation) - 1) * icc;
}

/**
 * People (or trials) in clusters that are worth as much as so many independent ones.
 *
 * Shapes: numbers in, whole numbers out. Units: people, clusters.
 * Method: effective count times design effect, rounded up in double precision (a product that ends a
 * hair above a whole number counts one more); clusters rounded up from that.
 * Source: method sheet E. Accuracy: exact; tests/reference/power-sheet.test.ts, case design-effect.
 * @throws RangeError as {@link computeDesignEffect} does
 */
export function countInClusters(
	effectiveCount: number,
	cluster: { clusterSize: number; icc: number; sizeVariation?: number }
): { totalCount: number; clusterCount: number } {
	requireCount('effectiveCount', effectiveCount, 0);
	const totalCount = Math.ceil(effectiveCount * computeDesignEffect(cluster));
	return { totalCount, clusterCount: Math.ceil(totalCount / cluster.clusterSize) };
}
