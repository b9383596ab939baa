import fc from 'fast-check';
import { computeNormalPoints } from '../../../scheduler/statistics/r-sequence.ts';

/** Covariances of two variables that are far from flat. */
export const anyShape = fc
	.tuple(
		fc.double({ min: 0.3, max: 4, noNaN: true }),
		fc.double({ min: 0.3, max: 4, noNaN: true }),
		fc.double({ min: -0.9, max: 0.9, noNaN: true })
	)
	.map(([sx, sy, rho]) => [
		[sx * sx, rho * sx * sy],
		[rho * sx * sy, sy * sy]
	]);

/** Lists of trials of so many variables, with values of the size of one. */
export function anyTrials(d: number, { least = 5, most = 25 } = {}) {
	const value = fc.double({ min: -4, max: 4, noNaN: true });
	const trial = fc.array(value, { minLength: d, maxLength: d });
	return fc.array(trial, { minLength: least, maxLength: most });
}

/** A normal cloud, tilted and away from the origin; the same every time. */
export function tiltedTrials(count: number): number[][] {
	return computeNormalPoints(count, 2).map(([a = 0, b = 0]) => [3 + a, 1 - 0.8 * a + 0.4 * b]);
}
