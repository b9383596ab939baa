import { computeEllipsoid } from '$scheduler/variability/compute-ellipsoid';

/** A 2-D ellipse {x : (x − center)ᵀ · shape⁻¹ · (x − center) = 1}; shape is factor² × covariance. */
export interface PlaneEllipse {
	readonly center: readonly [number, number];
	/** Symmetric, positive definite, in the squared units of the axes. */
	readonly shape: readonly [readonly [number, number], readonly [number, number]];
}

/** The same in any number of variables. */
export interface Ellipsoid {
	readonly center: readonly number[];
	readonly shape: readonly (readonly number[])[];
}

/** Half axes and the direction of the longer one. */
export interface EllipseAxes {
	readonly long: number;
	readonly short: number;
	/** Counter-clockwise from the first axis, above −π/2 up to π/2. */
	readonly angleRad: number;
}

/** An ellipse as SVG draws it: y downwards, angle clockwise. */
export interface PixelEllipse {
	readonly cx: number;
	readonly cy: number;
	readonly rx: number;
	readonly ry: number;
	readonly angleDeg: number;
}

/** A linear scale of a chart: value in, CSS px out. */
export type Scale = (value: number) => number;

/**
 * Half axes and direction of a 2-D ellipse.
 *
 * Shapes:  2 × 2 symmetric shape matrix.
 * Units:   half axes in the units of the variables (only meaningful when both share one unit or scale).
 * Method:  the engine's ellipsoid of factor 1.
 * Accuracy: every point of the drawn path solves the quadratic form to 1e-9 (ellipse-path.test.ts).
 * @throws {RangeError} a matrix that is not positive definite
 * @example computeEllipseAxes([[4, 0], [0, 1]]) // { long: 2, short: 1, angleRad: 0 }
 */
export function computeEllipseAxes(shape: PlaneEllipse['shape']): EllipseAxes {
	const [[a, b], [, d]] = shape;
	const determinant = a * d - b * b;
	if (!(a > 0 && d > 0 && determinant > 0 && Number.isFinite(a + d))) {
		throw new RangeError('an ellipse requires a positive definite shape matrix');
	}
	const symmetric = [
		[a, b],
		[b, d]
	];
	const { halfAxes, directions } = computeEllipsoid({
		mean: [0, 0],
		covariance: symmetric,
		factor: 1
	});
	const [long = 0, short = 0] = halfAxes;
	const [x = 1, y = 0] = directions[0] ?? [];
	// The half turn that looks to the right: a direction and its opposite are one axis.
	return { long, short, angleRad: x === 0 ? Math.PI / 2 : Math.atan(y / x) };
}

/**
 * The shadow of an ellipsoid on the plane of two of its variables.
 *
 * Method:  the shadow's shape matrix is the 2 × 2 block of the ellipsoid's.
 * @throws {RangeError} an index outside the ellipsoid
 */
export function projectEllipsoid(ellipsoid: Ellipsoid, i: number, j: number): PlaneEllipse {
	const at = (row: number, column: number) => {
		const value = ellipsoid.shape[row]?.[column];
		if (value === undefined) throw new RangeError('no such variable in this ellipsoid');
		return value;
	};
	const center = (index: number) => {
		const value = ellipsoid.center[index];
		if (value === undefined) throw new RangeError('no such variable in this ellipsoid');
		return value;
	};
	return {
		center: [center(i), center(j)],
		shape: [
			[at(i, i), at(i, j)],
			[at(j, i), at(j, j)]
		]
	};
}

/** The ellipse in the pixels of a chart, whose two scales may differ and whose y runs downwards. */
export function toPixelEllipse(ellipse: PlaneEllipse, x: Scale, y: Scale): PixelEllipse {
	const [perX, perY] = [x(1) - x(0), y(1) - y(0)];
	const [[a, b], [, d]] = ellipse.shape;
	const axes = computeEllipseAxes([
		[a * perX * perX, b * perX * perY],
		[b * perX * perY, d * perY * perY]
	]);
	return {
		cx: x(ellipse.center[0]),
		cy: y(ellipse.center[1]),
		rx: axes.long,
		ry: axes.short,
		angleDeg: (axes.angleRad * 180) / Math.PI
	};
}

/** SVG path of an ellipse: two half turns. */
export function ellipsePath({ cx, cy, rx, ry, angleDeg }: PixelEllipse): string {
	const [dx, dy] = [rx * Math.cos(rad(angleDeg)), rx * Math.sin(rad(angleDeg))];
	const arc = `A${round(rx)} ${round(ry)} ${round(angleDeg)} 1 1`;
	return `M${round(cx - dx)} ${round(cy - dy)}${arc} ${round(cx + dx)} ${round(cy + dy)}${arc} ${round(cx - dx)} ${round(cy - dy)}Z`;
}

/** Points on the outline, evenly in the parameter, for placing labels beside it. */
export function ellipseOutline(ellipse: PixelEllipse, count = 32): [number, number][] {
	const { cx, cy, rx, ry } = ellipse;
	const [cos, sin] = [Math.cos(rad(ellipse.angleDeg)), Math.sin(rad(ellipse.angleDeg))];
	return Array.from({ length: count }, (_, index) => {
		const t = (2 * Math.PI * index) / count;
		const [u, v] = [rx * Math.cos(t), ry * Math.sin(t)];
		return [cx + u * cos - v * sin, cy + u * sin + v * cos];
	});
}

function rad(deg: number): number {
	return (deg * Math.PI) / 180;
}

function round(value: number): number {
	return Math.round(value * 100) / 100;
}
