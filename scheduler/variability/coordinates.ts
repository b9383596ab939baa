import { multiplyMatrices, diagonal } from '../linear-algebra/matrix.ts';
import { solveSquare } from '../linear-algebra/solve-square.ts';
import { entry, multiplyVector, type Matrix, type Vector } from '../linear-algebra/vector.ts';

/** A way to write one execution as numbers, beside the units in which trials are stored. */
export interface CoordinateSystem {
	readonly name: string;
	/** From task units; null where this system cannot write the execution. */
	toCoordinates(x: Vector): number[] | null;
	/** Back to task units. */
	toUnits(z: Vector): number[];
	/** Derivative of {@link toUnits} at z (d × d): row i is variable i. */
	derivative(z: Vector): number[][];
}

/**
 * Deviations from an origin in units of a declared scale, such as the SD of a baseline.
 * @throws {RangeError} a scale that is not positive
 */
export function createScaledSystem(options: {
	origin: Vector;
	scale: Vector;
	name?: string;
}): CoordinateSystem {
	const { origin, scale, name = 'scaled' } = options;
	if (scale.length !== origin.length || !scale.every((value) => value > 0))
		throw new RangeError('a scaled coordinate system requires one positive scale a variable');
	return {
		name,
		toCoordinates: (x) => x.map((value, i) => (value - entry(origin, i)) / entry(scale, i)),
		toUnits: (z) => z.map((value, i) => entry(origin, i) + value * entry(scale, i)),
		derivative: () => diagonal(scale)
	};
}

/** Natural logarithms of the variables; turns products into sums. Only positive values can be written. */
export function createLogSystem(): CoordinateSystem {
	return {
		name: 'log',
		toCoordinates: (x) => (x.every((value) => value > 0) ? x.map(Math.log) : null),
		toUnits: (z) => z.map(Math.exp),
		derivative: (z) => diagonal(z.map(Math.exp))
	};
}

/**
 * Weighted sums of the variables in place of themselves, such as sum and difference or the angles of limbs
 * against the room.
 *
 * Shapes:  weights (d × d), one row a new coordinate.
 * @throws {RangeError} weights that cannot be undone
 */
export function createLinearSystem(options: { name: string; weights: Matrix }): CoordinateSystem {
	const { name, weights } = options;
	const columns = weights.map((_, j) =>
		solveSquare(
			weights,
			weights.map((_row, i) => (i === j ? 1 : 0))
		)
	);
	if (!columns.every((column) => column !== null))
		throw new RangeError('a linear coordinate system requires weights that can be undone');
	const inverse = weights.map((_, i) => columns.map((column) => entry(column, i)));
	return {
		name,
		toCoordinates: (x) => multiplyVector(weights, x),
		toUnits: (z) => multiplyVector(inverse, z),
		derivative: () => inverse
	};
}

/**
 * The square of one variable times a factor in its place, such as the way that a speed slides; the others
 * stay. Only positive values can be written.
 */
export function createSquareSystem(options: {
	name: string;
	axis: number;
	factor: number;
}): CoordinateSystem {
	const { name, axis, factor } = options;
	const replace = (values: Vector, value: number) =>
		values.map((old, i) => (i === axis ? value : old));
	return {
		name,
		toCoordinates: (x) => (entry(x, axis) > 0 ? replace(x, factor * entry(x, axis) ** 2) : null),
		toUnits: (z) => replace(z, Math.sqrt(Math.max(0, entry(z, axis) / factor))),
		derivative: (z) =>
			diagonal(z.map((value, i) => (i === axis ? 0.5 / Math.sqrt(value * factor) : 1)))
	};
}

/**
 * Horizontal and vertical parts of a velocity in place of its angle and speed; other variables stay.
 * @param options places of angle and speed among the variables, how many radians one angle unit is, and by
 *   how many radians the velocity is turned against the angle (a quarter turn for a ball on an arm)
 * @throws {RangeError} angle and speed at the same place
 */
export function createVelocitySystem(options: {
	angleAxis: number;
	speedAxis: number;
	radPerUnit: number;
	turnRad?: number;
}): CoordinateSystem {
	const { angleAxis, speedAxis, radPerUnit, turnRad = 0 } = options;
	if (angleAxis === speedAxis)
		throw new RangeError('a velocity needs an angle and a speed at different places');
	const replace = (values: Vector, atAngle: number, atSpeed: number) =>
		values.map((value, i) => (i === angleAxis ? atAngle : i === speedAxis ? atSpeed : value));
	// Between minus and plus half a turn, as angles are stored.
	const toAngle = (vx: number, vy: number) => {
		const angle = Math.atan2(vy, vx) - turnRad;
		return turnRad === 0 ? angle : Math.atan2(Math.sin(angle), Math.cos(angle));
	};
	return {
		name: 'velocity',
		toCoordinates: (x) => {
			const [angle, speed] = [entry(x, angleAxis) * radPerUnit + turnRad, entry(x, speedAxis)];
			return speed > 0 ? replace(x, speed * Math.cos(angle), speed * Math.sin(angle)) : null;
		},
		toUnits: (z) => {
			const [vx, vy] = [entry(z, angleAxis), entry(z, speedAxis)];
			return replace(z, toAngle(vx, vy) / radPerUnit, Math.hypot(vx, vy));
		},
		derivative: (z) => {
			const [vx, vy] = [entry(z, angleAxis), entry(z, speedAxis)];
			const speed = Math.hypot(vx, vy);
			return differentiate(
				z,
				(i, j) => {
					const isX = j === angleAxis;
					if (i === speedAxis) return (isX ? vx : vy) / speed;
					return (isX ? -vy : vx) / (speed * speed * radPerUnit);
				},
				[angleAxis, speedAxis]
			);
		}
	};
}

/** The unit matrix but for the rows and columns of two axes. */
function differentiate(
	z: Vector,
	slope: (i: number, j: number) => number,
	axes: readonly [number, number]
): number[][] {
	const isMixed = (i: number) => axes.includes(i);
	return z.map((_, i) =>
		z.map((_other, j) => (isMixed(i) && isMixed(j) ? slope(i, j) : i === j ? 1 : 0))
	);
}

/** Trials in another system; null when one of them cannot be written in it. */
export function convertExecutions(executions: Matrix, system: CoordinateSystem): number[][] | null {
	const converted = executions.map((x) => system.toCoordinates(x));
	return converted.every((z) => z !== null) ? converted : null;
}

/** Jacobian in the coordinates of a system from that in task units, at a place z of the system. */
export function convertJacobian(J: Matrix, system: CoordinateSystem, z: Vector): number[][] {
	return multiplyMatrices(J, system.derivative(z));
}
