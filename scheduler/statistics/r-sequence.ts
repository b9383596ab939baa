import { computeNormalQuantile } from './normal.ts';

/**
 * Evenly spread points of the unit cube, the same every time.
 *
 * Shapes:  result (count × dimensions), entries in [0, 1).
 * Method:  additive recurrence (½ + i·α) mod 1, α_j = φ^−j, φ the root of x^(d+1) = x + 1.
 * Source:  Roberts 2018 (R-sequence); case r-sequence.
 */
export function computeRSequence(count: number, dimensions: number): number[][] {
	let root = 2;
	for (let round = 0; round < 60; round++) root = (1 + root) ** (1 / (dimensions + 1));
	const alpha = Array.from({ length: dimensions }, (_, j) => (1 / root) ** (j + 1));
	return Array.from({ length: count }, (_, i) => alpha.map((a) => (0.5 + (i + 1) * a) % 1));
}

/** R-sequence points turned into standard normal ones by Φ⁻¹. */
export function computeNormalPoints(count: number, dimensions: number): number[][] {
	return computeRSequence(count, dimensions).map((point) => point.map(computeNormalQuantile));
}
