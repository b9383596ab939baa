import { entry } from '$scheduler/linear-algebra/vector';
import type { TaskVariable } from '$scheduler/tasks/task-record';

export interface View {
	/** Turn about the upright axis and tilt towards the reader, degrees. */
	readonly turnDeg: number;
	readonly tiltDeg: number;
}

export interface Projected {
	readonly x: number;
	readonly y: number;
	/** Larger is nearer to the reader. */
	readonly depth: number;
}

/**
 * A point of three variables on the page: ranges become a cube of side 2 around 0, seen from far away
 * (no perspective), the third variable upright.
 *
 * Units:   x to the right, y downwards, both within ± √3.
 */
export function projectPoint(
	at: readonly number[],
	variables: readonly Pick<TaskVariable, 'min' | 'max'>[],
	view: View
): Projected {
	const [a = 0, b = 0, c = 0] = variables.map(
		({ min, max }, i) => (2 * (entry(at, i) - min)) / (max - min) - 1
	);
	const [turn, tilt] = [rad(view.turnDeg), rad(view.tiltDeg)];
	const right = a * Math.cos(turn) - b * Math.sin(turn);
	const away = a * Math.sin(turn) + b * Math.cos(turn);
	return {
		x: right,
		y: -(c * Math.cos(tilt) + away * Math.sin(tilt)),
		depth: c * Math.sin(tilt) - away * Math.cos(tilt)
	};
}

/** The twelve edges of the ranges' box, each as two corners in task units. */
export function listBoxEdges(
	variables: readonly Pick<TaskVariable, 'min' | 'max'>[]
): (readonly [number[], number[]])[] {
	const corner = (bits: number) =>
		variables.map(({ min, max }, i) => ((bits >> i) & 1 ? max : min));
	return Array.from({ length: 8 }, (_, bits) => bits).flatMap((bits) =>
		[0, 1, 2]
			.filter((axis) => !((bits >> axis) & 1))
			.map((axis) => [corner(bits), corner(bits | (1 << axis))] as const)
	);
}

function rad(deg: number): number {
	return (deg * Math.PI) / 180;
}
