import { norm } from '../linear-algebra/vector.ts';
import { computeTetherAlignment } from './models/tether/tether-facts.ts';
import type { TetheredBallRecord } from './models/tether/tether-record.ts';
import { computeSlowestThrow } from './models/throw-facts.ts';
import type { TaskRecord, TaskVariable } from './task-record.ts';

/** Where a task is not as simple as elsewhere: a code and the numbers that go with it. */
export interface Degeneracy {
	readonly code:
		/** Tethered ball: at this angle the target is hit at any speed; the angle alone counts. */
		| 'velocity-free-line'
		/** Tethered ball: from these angles the ball swings through the center of the post. */
		| 'through-center'
		/** Tethered ball: without damping a speed and its opposite run along the same ellipse. */
		| 'mirror-speeds'
		| 'target-inside-post'
		/** The throw of least speed: there the angle does not count, to first order. */
		| 'slowest-throw'
		/** Angles up to this one never reach the target. */
		| 'angles-too-flat'
		/** The puck is released beyond the target within the ranges. */
		| 'release-beyond-target'
		/** Forces up to this one do not move the puck. */
		| 'push-too-weak'
		/** The ball is met at or above the target height within the ranges. */
		| 'target-below-impact'
		| 'target-out-of-reach'
		/** The target is reached only with the arm nearly stretched: the manifold shrinks to a point. */
		| 'target-at-full-stretch'
		/** The measure is counted in bins: it moves in small jumps and its manifold cannot be followed. */
		| 'counted-measure'
		/** The result depends on no variable. */
		| 'no-slope';
	readonly values: Readonly<Record<string, number | readonly number[]>>;
}

const DEG_PER_RAD = 180 / Math.PI;
/** Reach left, as a share of the whole, that counts as stretched. */
const STRETCH_SHARE = 1e-3;

/**
 * What is to be known about a task before its manifold is looked at.
 *
 * Source:  method sheet A1 to A8, “degenerate”.
 */
export function findDegeneracies(record: TaskRecord): Degeneracy[] {
	switch (record.type) {
		case 'tethered-ball':
			return findTether(record);
		case 'paddle-bounce':
			return highest(record.variables[2]) >= record.targetHeight
				? [{ code: 'target-below-impact', values: { targetHeight: record.targetHeight } }]
				: [];
		case 'projectile':
		case 'throw-azimuth':
			return findThrow(record, record.h, record.variables[1]);
		case 'throw-height':
			return findThrow(record, lowest(record.variables[2]), record.variables[1]);
		case 'puck':
			return highest(record.variables[1]) >= record.D
				? [{ code: 'release-beyond-target', values: { D: record.D } }]
				: [];
		case 'puck-friction':
			return record.x0 >= record.D
				? [{ code: 'release-beyond-target', values: { D: record.D } }]
				: [];
		case 'puck-push': {
			const force = record.mu * record.m * record.g;
			return lowest(record.variables[0]) <= force
				? [{ code: 'push-too-weak', values: { force } }]
				: [];
		}
		case 'arm-endpoint':
			return findReach(record.lengths, norm(record.target));
		case 'arm-x':
			return findReach([...record.lengths, 0], Math.abs(record.targetX));
		case 'cart-pendulum':
			return record.measure === 'predictability' ? [{ code: 'counted-measure', values: {} }] : [];
		case 'linear':
			return record.coef.every((weight) => weight === 0) ? [{ code: 'no-slope', values: {} }] : [];
		case 'two-finger':
		case 'formula':
			return [];
	}
}

function findTether(record: TetheredBallRecord): Degeneracy[] {
	const found: Degeneracy[] = [];
	const { number, freeAngleDeg, passTime } = computeTetherAlignment(record);
	if (freeAngleDeg !== null)
		found.push({
			code: 'velocity-free-line',
			values: { alphaDeg: freeAngleDeg, alignment: number, passTime }
		});
	const [px, py] = record.pivot;
	const ratio = record.arm / Math.hypot(px, py);
	if (ratio <= 1) {
		const [middle, half] = [Math.atan2(py, px), Math.acos(-ratio)];
		const alphaDeg = [middle - half, middle + half].map(toHalfTurn);
		found.push({ code: 'through-center', values: { alphaDeg } });
	}
	if (record.relaxationTime === null) found.push({ code: 'mirror-speeds', values: {} });
	const distance = norm(record.target);
	if (distance <= record.postRadius + record.ballRadius)
		found.push({ code: 'target-inside-post', values: { distance } });
	return found;
}

function findThrow(
	place: { D: number; H: number; g: number },
	h: number,
	angle: TaskVariable | undefined
): Degeneracy[] {
	const { speed, thetaDeg } = computeSlowestThrow({ ...place, h });
	const flat = Math.atan2(place.H - h, place.D) * DEG_PER_RAD;
	const found: Degeneracy[] = [];
	if (lowest(angle) <= thetaDeg && thetaDeg <= highest(angle))
		found.push({ code: 'slowest-throw', values: { speed, thetaDeg } });
	if (lowest(angle) <= flat) found.push({ code: 'angles-too-flat', values: { thetaDeg: flat } });
	return found;
}

function findReach(lengths: readonly number[], distance: number): Degeneracy[] {
	const most = lengths.reduce((sum, length) => sum + length, 0);
	const least = lengths.includes(0) ? 0 : Math.max(0, 2 * Math.max(...lengths) - most);
	const values = { distance, least, most };
	if (distance > most || distance < least) return [{ code: 'target-out-of-reach', values }];
	const isStretched = most - distance < STRETCH_SHARE * most;
	const isFolded = least > 0 && distance - least < STRETCH_SHARE * most;
	return isStretched || isFolded ? [{ code: 'target-at-full-stretch', values }] : [];
}

/** An angle in degrees between −180 and 180. */
function toHalfTurn(rad: number): number {
	return Math.atan2(Math.sin(rad), Math.cos(rad)) * DEG_PER_RAD;
}

function lowest(variable: TaskVariable | undefined): number {
	return variable?.min ?? Number.POSITIVE_INFINITY;
}

function highest(variable: TaskVariable | undefined): number {
	return variable?.max ?? Number.NEGATIVE_INFINITY;
}
