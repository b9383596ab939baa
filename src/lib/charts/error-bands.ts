import { contours } from 'd3-contour';
import type { ErrorGrid, Point } from './cloud-data';

/** Count of colours of the error map (--map-0 to --map-9 in app.css). */
export const bandCount = 10;

export interface ErrorBand {
	/** Everything from this result upwards is painted over with `level`. */
	readonly from: number;
	/** 0 nearest to no error, bandCount − 1 farthest. */
	readonly level: number;
	/** Closed rings in task units; may reach half a cell beyond the window. */
	readonly rings: readonly (readonly Point[])[];
}

/**
 * Cuts an error map into bands of equal steps of the result on both sides of zero.
 *
 * Shapes:  painted in the order given, each over the one before, they fill the window; below the first
 *          everything has the last level.
 * Units:   those of the grid.
 * Method:  marching squares on the signed result, so that no band is lost where it changes its sign.
 * @throws {RangeError} a step that is not positive
 */
export function computeErrorBands(grid: ErrorGrid, step: number): ErrorBand[] {
	if (!(step > 0)) throw new RangeError('the step between bands must be positive');
	const indices = Array.from({ length: 2 * bandCount - 1 }, (_, index) => index + 1 - bandCount);
	return indices.map((index) => ({
		from: index * step,
		level: index >= 0 ? index : -index - 1,
		rings: computeRings(grid, index * step)
	}));
}

/** Rings around all places whose result is at least `from`. */
export function computeRings(grid: ErrorGrid, from: number): Point[][] {
	const [nx, ny] = [grid.x.length, grid.y.length];
	const values = grid.values.flatMap((row) => row.map((value) => value ?? Number.NaN));
	const found = contours().size([nx, ny]).contour(values, from);
	return found.coordinates.flatMap((polygon) =>
		polygon.map((ring) => ring.map(([u = 0, v = 0]) => toUnits(grid, u, v)))
	);
}

/** Rings around all places where the task has no result; none when it has one everywhere. */
export function computeUndefinedRings(grid: ErrorGrid): Point[][] {
	const isUndefined = grid.values.map((row) => row.map((value) => (value === null ? 1 : 0)));
	if (!isUndefined.some((row) => row.includes(1))) return [];
	return computeRings({ ...grid, values: isUndefined }, 0.5);
}

/** A round step that shows the map in about as many bands as there are colours. */
export function chooseBandStep(grid: ErrorGrid, tolerance: number | null): number {
	const sizes = grid.values
		.flat()
		.filter((value) => value !== null)
		.map(Math.abs)
		.sort((a, b) => a - b);
	const large = sizes[Math.floor(0.9 * (sizes.length - 1))] ?? 1;
	return niceStep(Math.max(large / bandCount, tolerance ?? 0, Number.MIN_VALUE * 1e10));
}

/** The smallest of 1, 2 and 5 times a power of ten that is at least this size. */
export function niceStep(size: number): number {
	const power = 10 ** Math.floor(Math.log10(size));
	const factor = [1, 2, 5, 10].find((candidate) => candidate * power >= size * 0.999) ?? 10;
	return factor * power;
}

/** The contour library puts value i at i + ½. */
function toUnits({ x, y }: ErrorGrid, u: number, v: number): Point {
	return [at(x, u - 0.5), at(y, v - 0.5)];
}

/** Value of an evenly spaced axis at a fractional index, also a little outside it. */
function at(steps: readonly number[], index: number): number {
	const [first = 0, second = first] = steps;
	return first + index * (second - first);
}
