import { removeDirections, splitRowSpace } from '../linear-algebra/row-space.ts';
import { computeSymmetricEigen } from '../linear-algebra/symmetric-eigen.ts';
import { entry, norm, row, subtract, type Matrix } from '../linear-algebra/vector.ts';

export interface CloudAlignment {
	/** Angle between the major axis and the solutions, degrees, 0 to 90. */
	readonly angleDeg: number;
	/** Unit vector, largest component positive. */
	readonly majorAxis: readonly number[];
	/** Largest first. */
	readonly eigenvalues: readonly number[];
	/** Largest over second largest eigenvalue. */
	readonly eigenvalueRatio: number;
	/** Longest over shortest half axis. */
	readonly aspectRatio: number;
	/** False for a cloud so round that the angle says nothing (ratio below 1.3). */
	readonly isMeaningful: boolean;
}

export type CloudAlignmentResult =
	({ ok: true } & CloudAlignment) | { ok: false; reason: 'no-spread' };

const RATIO_MIN = 1.3;

/**
 * How a cloud lies to the solutions: angle of its major axis to the tangent space, and how long it is.
 *
 * Shapes:  covariance (d × d), in scaled coordinates; tangents (k × d): directions that span the tangent
 *          space of the solutions at the projected mean, of any length.
 * Method:  eigenvector of the largest eigenvalue, split into its parts along and across the tangents.
 * Source:  method sheet B12; case alignment-two-finger (numpy eigh). Accuracy: 1e-7 degrees.
 * @throws {RangeError} no tangent, or a tangent of length 0
 */
export function computeCloudAlignment(covariance: Matrix, tangents: Matrix): CloudAlignmentResult {
	const { basis } = splitRowSpace(tangents);
	if (basis.length === 0) throw new RangeError('computeCloudAlignment requires a tangent');
	const { values, vectors } = computeSymmetricEigen(covariance);
	const eigenvalues = [...values].reverse();
	const [first = 0, second = 0] = eigenvalues;
	const last = entry(values, 0);
	if (!(first > 0)) return { ok: false, reason: 'no-spread' };
	const majorAxis = row(vectors, vectors.length - 1);
	const across = removeDirections(majorAxis, basis);
	const along = subtract(majorAxis, across);
	// A flat cloud has no finite ratio; the largest double keeps JSON and comparisons whole.
	const over = (value: number) =>
		value > 0 ? Math.min(first / value, Number.MAX_VALUE) : Number.MAX_VALUE;
	return {
		ok: true,
		angleDeg: (Math.atan2(norm(across), norm(along)) * 180) / Math.PI,
		...{ majorAxis, eigenvalues, eigenvalueRatio: over(second) },
		aspectRatio: Math.sqrt(over(last)),
		isMeaningful: over(second) >= RATIO_MIN
	};
}
