import {
	computePowerWithLosses,
	computeTwoSampleTPower,
	type Losses,
	type TwoSampleTest
} from './two-sample-t.ts';

export type PowerCurveOptions = TwoSampleTest & {
	effectSize: number;
	losses: Losses;
	/** Numbers of people per group (group 1) to compute, in the order wanted. */
	ns: readonly number[];
	/** People of group 2 for each of group 1; 1 when left out. */
	ratio?: number;
};

export type PowerPoint = {
	/** People in group 1 at the start. */
	n: number;
	power: number;
	/** Null when the losses leave fewer than two people in a group. */
	powerWithLosses: number | null;
};

/**
 * Power over group sizes, as planned and after losses: the curve and the table beside it.
 *
 * Shapes: list of n in, list of points of the same length and order out.
 * Units: people per group; power 0 to 1.
 * Method and source: see `computeTwoSampleTPower`.
 * Accuracy: absolute 1e-10; tests/reference/two-sample-t-power.test.ts.
 * @throws RangeError when an n is below 2 or a share is out of range
 * @example computePowerCurve({ effectSize: 0.8, alpha: 0.05, sides: 2, ns: [8, 30], losses })
 */
export function computePowerCurve(options: PowerCurveOptions): PowerPoint[] {
	const { effectSize, alpha, sides, losses, ratio = 1 } = options;
	return options.ns.map((n) => {
		const design = { effectSize, alpha, sides, n1: n, n2: n * ratio };
		const left = n * Math.min(1, ratio) * (1 - losses.peopleLossShare);
		const powerWithLosses = left < 2 ? null : computePowerWithLosses(design, losses);
		return { n, power: computeTwoSampleTPower(design), powerWithLosses };
	});
}
