import { add, entry, subtract } from '$scheduler/linear-algebra/vector';
import { createScaledTask } from '$scheduler/tasks/scaled-task';
import { isHit, type Task } from '$scheduler/tasks/task';
import type { Point } from '$lib/charts/cloud-data';

/** The share of a cloud that hits when it is carried, as it is, to a place of the line. */
export interface ForgivingPoint {
	readonly at: readonly number[];
	/** Length of the line up to here, in scales of the variables. */
	readonly length: number;
	readonly share: number;
}

/** Most places asked about on one branch. */
const PLACES_MAX = 64;
/** Branches shorter than this, in scales, are left out: they are corners of the picture. */
const LENGTH_MIN = 1;

/**
 * What a line of perfect trials forgives: the share of hits of a cloud moved along it without turning.
 *
 * Shapes:  trials (n × d), branches of points (d each); task units.
 * Method:  the trials are shifted so that the cloud's middle comes to the point, in scaled coordinates.
 */
export function computeForgiveness(
	task: Task,
	trials: readonly (readonly number[])[],
	branches: readonly (readonly (readonly number[])[])[]
): ForgivingPoint[][] {
	const scaled = createScaledTask(task);
	const shareAt = createShareReader(task, trials);
	return branches
		.map((branch) => thin(measure(branch, (at) => scaled.toScaled(at))))
		.filter((branch) => (branch.at(-1)?.length ?? 0) >= LENGTH_MIN)
		.map((branch) => branch.map(({ at, length }) => ({ at, length, share: shareAt(at) })));
}

/** How large a share of a cloud hits when it is carried to a place; all in task units. */
export function createShareReader(
	task: Task,
	trials: readonly (readonly number[])[]
): (at: readonly number[]) => number {
	const scaled = createScaledTask(task);
	const rows = trials.map((x) => scaled.toScaled(x));
	const middle = (rows[0] ?? []).map(
		(_, axis) => rows.reduce((sum, row) => sum + entry(row, axis), 0) / rows.length
	);
	const rests = rows.map((row) => subtract(row, middle));
	return (at) => {
		const place = scaled.toScaled(at);
		const hits = rests.filter((rest) => {
			const x = scaled.toUnits(add(place, rest));
			return task.findInvalid(x) === null && isHit(task, task.evaluate(x));
		});
		return hits.length / rests.length;
	};
}

/** A branch of a slice, with the variables that are held. */
export function liftBranch(
	branch: readonly Point[],
	[first, second]: readonly [number, number],
	point: readonly number[]
): number[][] {
	return branch.map(([x, y]) =>
		point.map((value, i) => (i === first ? x : i === second ? y : value))
	);
}

interface Measured {
	readonly at: readonly number[];
	readonly length: number;
}

function measure(
	branch: readonly (readonly number[])[],
	toScaled: (x: readonly number[]) => number[]
): Measured[] {
	let length = 0;
	let before: number[] | null = null;
	return branch.map((at) => {
		const z = toScaled(at);
		if (before) length += Math.hypot(...subtract(z, before));
		before = z;
		return { at, length };
	});
}

/** Evenly spaced places of a branch, both ends included. */
function thin(branch: readonly Measured[]): Measured[] {
	if (branch.length <= PLACES_MAX) return [...branch];
	const whole = branch.at(-1)?.length ?? 0;
	const kept: Measured[] = [];
	branch.forEach((place, index) => {
		const isDue = place.length >= (kept.length * whole) / (PLACES_MAX - 1);
		if (isDue || index === branch.length - 1) kept.push(place);
	});
	return kept;
}
