import { computeSymmetricEigen } from '../linear-algebra/symmetric-eigen.ts';
import { entry, scale, type Matrix, type Vector } from '../linear-algebra/vector.ts';

export interface Ellipsoid {
	readonly center: readonly number[];
	/** Half axes, longest first; lengths in the units of the axes they mix. */
	readonly halfAxes: readonly number[];
	/** Unit vectors of the half axes, one a row, longest first; largest component positive. */
	readonly directions: readonly (readonly number[])[];
	readonly volume: number;
}

/**
 * The ellipsoid {x: (x − mean)ᵀ·S⁻¹·(x − mean) ≤ c²}: center, half axes, directions, volume.
 *
 * Shapes:  mean (d), covariance S (d × d); factor c², see ellipsoid-factors.ts.
 * Method:  eigenvalues λ: half axes √(c²·λ), volume π^(d/2) / Γ(d/2 + 1) · c^d · √det S.
 * Source:  method sheet B2; cases ellipse-faithful-chi2-95, ellipsoid-setosa-4d-volume (R eigen).
 */
export function computeEllipsoid(options: {
	mean: Vector;
	covariance: Matrix;
	factor: number;
}): Ellipsoid {
	const { mean, covariance, factor } = options;
	const { values, vectors } = computeSymmetricEigen(covariance);
	const halfAxes = values.map((value) => Math.sqrt(factor * Math.max(value, 0))).reverse();
	return {
		center: [...mean],
		halfAxes,
		directions: [...vectors].reverse(),
		volume: halfAxes.reduce((product, length) => product * length, unitBallVolume(mean.length))
	};
}

/** Volume of the ball of radius 1 in d dimensions, by V(d) = 2π/d · V(d − 2). */
function unitBallVolume(d: number): number {
	return d === 0 ? 1 : d === 1 ? 2 : ((2 * Math.PI) / d) * unitBallVolume(d - 2);
}

/**
 * Outline of a two-dimensional ellipse as points, for pictures.
 * @throws {RangeError} not two variables
 */
export function traceEllipse(ellipse: Ellipsoid, pointCount = 120): [number, number][] {
	if (ellipse.center.length !== 2) throw new RangeError('traceEllipse requires two variables');
	const arms = ellipse.directions.map((direction, i) =>
		scale(direction, entry(ellipse.halfAxes, i))
	);
	return Array.from({ length: pointCount }, (_, i) => {
		const angle = (2 * Math.PI * i) / pointCount;
		const at = (axis: number) =>
			entry(ellipse.center, axis) +
			Math.cos(angle) * entry(arms[0] ?? [], axis) +
			Math.sin(angle) * entry(arms[1] ?? [], axis);
		return [at(0), at(1)];
	});
}
