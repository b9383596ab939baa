import { computeNormalCdf, computeNormalDensity } from '../statistics/normal.ts';
import { spreadPoints, type WeightedPoints } from '../statistics/quadrature.ts';

/** 2: a boundary above and its mirror image below. 1: above only. */
export type LookSides = 1 | 2;

/** A look whose boundary is not fixed yet. */
export type PreparedLook = {
	/** Probability of getting this far and crossing z upwards here. */
	crossAbove: (z: number) => number;
	/** Probability of getting this far and crossing -z downwards here; 0 with one side. */
	crossBelow: (z: number) => number;
	/** Fixes the boundary: only what stays within goes on. */
	keepBelow: (z: number) => void;
};

/** The score (z √information) of those who go on: points, and weight times density at each. */
type Carried = { information: number; points: number[]; masses: number[] };

/** Beyond so many standard deviations there is nothing to integrate. */
const REACH = 8.5;

/**
 * Carries the density of a statistic through looks at which it may cross a boundary.
 *
 * Shapes: drift in, looks out. Units: drift is the expected statistic at full information.
 * Method: the score has independent normal increments, so that each density is an integral of the
 * one before over the continuation region (Gauss-Legendre panels no wider than one standard deviation
 * of the increment that comes next or came last).
 * Source: P. Armitage, C. McPherson and B. Rowe, JRSS A 132 (1969).
 * Accuracy: absolute 1e-9 of probabilities; tests/reference/group-sequential.test.ts.
 */
export function createLooks(
	sides: LookSides,
	drift = 0
): { prepare: (information: number) => PreparedLook } {
	let carried: Carried = { information: 0, points: [0], masses: [1] };
	const prepare = (information: number): PreparedLook => {
		const before = carried;
		const step = information - before.information;
		const spread = Math.sqrt(step);
		const root = Math.sqrt(information);
		const sum = (compute: (distance: number) => number) =>
			before.masses.reduce((total, mass, i) => total + mass * compute(before.points[i] ?? 0), 0);
		const shift = drift * step;
		return {
			crossAbove: (z) => sum((s) => computeNormalCdf((s + shift - z * root) / spread)),
			crossBelow: (z) =>
				sides === 1 ? 0 : sum((s) => computeNormalCdf((-z * root - s - shift) / spread)),
			keepBelow: (z) => {
				const { points, weights } = coverRegion(z, {
					sides,
					root,
					drift: drift * information,
					spread
				});
				const masses = points.map((point, i) => {
					const density = sum((s) => computeNormalDensity((point - s - shift) / spread) / spread);
					return (weights[i] ?? 0) * density;
				});
				carried = { information, points, masses };
			}
		};
	};
	return { prepare };
}

/** Points of the continuation region, in scores. */
function coverRegion(
	z: number,
	options: { sides: LookSides; root: number; drift: number; spread: number }
): WeightedPoints {
	const { sides, root, drift, spread } = options;
	const high = Math.min(z * root, drift + REACH * root);
	const low = Math.max(sides === 2 ? -z * root : -Infinity, drift - REACH * root);
	if (!(high > low)) return { points: [], weights: [] };
	const panelCount = Math.min(60, Math.max(1, Math.ceil((high - low) / (2.5 * spread))));
	return spreadPoints(low, high, panelCount);
}
