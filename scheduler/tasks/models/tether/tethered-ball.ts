import { entry, type Vector } from '../../../linear-algebra/vector.ts';
import type { ResultModel } from '../../result-model.ts';
import type { InvalidReason } from '../../task.ts';
import {
	createSwingTable,
	findFirstWithin,
	findNearestPass,
	type SwingTable
} from './nearest-pass.ts';
import type { TetheredBallRecord } from './tether-record.ts';
import {
	computeSwingWeights,
	createLaunch,
	createTetherSwing,
	placeAt,
	velocityAt,
	type Launch
} from './tether-swing.ts';

/** Everything about one throw. */
export interface TetherPass {
	readonly launch: Launch;
	/** When the ball is nearest to the target, s; distance then, m. */
	readonly time: number;
	readonly distance: number;
	/** The distance with the side: positive left of the target as seen along the ball's way; NaN at rest. */
	readonly signed: number;
	/** When the ball meets the post before that; null: it does not. */
	readonly postTime: number | null;
	/** Least distance of the ball from the post's center up to the nearest pass, m. */
	readonly centerDistance: number;
}

const RAD_PER_DEG = Math.PI / 180;
const POST_CENTER = [0, 0] as const;
/** Speed, as a share of the swing's own, below which a ball counts as at rest. */
const REST_SHARE = 1e-12;

/**
 * Follows one throw to its nearest pass.
 *
 * Units:   alpha rad, speed m/s.
 * Source:  method sheet A1; cases task-tether, 1e-6.
 */
export function followThrow(
	record: TetheredBallRecord,
	table: SwingTable,
	alpha: number,
	speed: number
): TetherPass {
	const launch = createLaunch(record, alpha, speed);
	const nearest = findNearestPass(table, launch, record.target);
	const radius = record.postRadius + record.ballRadius;
	const center = findNearestPass(table, launch, POST_CENTER, nearest.time);
	const isPost = center.squared < radius ** 2;
	const postTime = isPost
		? findFirstWithin(table, launch, POST_CENTER, { radius, end: nearest.time })
		: null;
	return {
		...{ launch, time: nearest.time, distance: Math.sqrt(nearest.squared), postTime },
		signed: computeSigned(record, table, launch, nearest.time),
		centerDistance: Math.sqrt(center.squared)
	};
}

/**
 * A throw of the tethered ball as a task: angle in degrees and speed in m/s.
 *
 * Method:  evaluate gives ± the penalty for a ball on the post (or, with `truncate`, the least distance
 *          up to there); results stay smooth across the post, so that the manifold can be followed.
 *          Jacobian by the envelope theorem: ∂s/∂x = n̂·∂r/∂x at the nearest pass.
 * Source:  method sheet A1; cases tether-jacobian-1 and -3, 1e-5.
 */
export function createTetheredBall(record: TetheredBallRecord): ResultModel {
	const table = createSwingTable(createTetherSwing(record));
	const follow = (x: Vector) => followThrow(record, table, entry(x, 0) * RAD_PER_DEG, entry(x, 1));
	const shorten = (pass: TetherPass) => (record.postHit === 'truncate' ? cutAtPost(pass) : pass);
	const cutAtPost = (pass: TetherPass): TetherPass => {
		if (pass.postTime === null) return pass;
		const { time, squared } = findNearestPass(table, pass.launch, record.target, pass.postTime);
		const signed = computeSigned(record, table, pass.launch, time, pass.postTime);
		return { ...pass, time, distance: Math.sqrt(squared), signed };
	};
	const gradient = (x: Vector) =>
		computeSlopes(record, table, shorten(follow(x)), entry(x, 0) * RAD_PER_DEG, entry(x, 1));
	const findReason = ({ postTime, signed }: TetherPass): InvalidReason | null => {
		if (postTime !== null && record.postHit === 'penalty') return 'post-hit';
		return Number.isFinite(signed) ? null : 'ball-at-rest';
	};
	return {
		resultCount: 1,
		evaluate: (x) => {
			const pass = follow(x);
			if (pass.postTime === null || record.postHit === 'truncate') return shorten(pass).signed;
			return pass.signed < 0 ? -record.postPenalty : record.postPenalty;
		},
		gradient,
		results: (x) => [shorten(follow(x)).signed],
		jacobian: (x) => [gradient(x)],
		findInvalid: (x) => findReason(follow(x)),
		assess: (x) => {
			const pass = follow(x);
			return { result: shorten(pass).signed, invalid: findReason(pass) };
		}
	};
}

/** Distance with the sign of v̂ × (r − target); NaN where the ball is at rest there. */
function computeSigned(
	{ target }: TetheredBallRecord,
	{ swing }: SwingTable,
	launch: Launch,
	time: number,
	end: number = swing.window
): number {
	const at = computeSwingWeights(swing, time);
	const [x, y] = placeAt(launch, at);
	const [vx, vy] = velocityAt(launch, at);
	const rest = REST_SHARE * swing.omega0 * Math.hypot(launch.place[0], launch.place[1]);
	if (!(Math.hypot(vx, vy) > rest)) return Number.NaN;
	const side = vx * (y - target[1]) - vy * (x - target[0]);
	const isTurning = time > 0 && time < end;
	if (isTurning) return side / Math.hypot(vx, vy);
	return Math.sign(side) * Math.hypot(x - target[0], y - target[1]);
}

/** ∂s/∂α per degree and ∂s/∂v. */
function computeSlopes(
	{ target, arm }: TetheredBallRecord,
	{ swing }: SwingTable,
	pass: TetherPass,
	alpha: number,
	speed: number
): number[] {
	const at = computeSwingWeights(swing, pass.time);
	const [x, y] = placeAt(pass.launch, at);
	const [vx, vy] = velocityAt(pass.launch, at);
	const [cos, sin] = [Math.cos(alpha), Math.sin(alpha)];
	const byAngle = [-at.c * arm * sin - at.s * speed * cos, at.c * arm * cos - at.s * speed * sin];
	const bySpeed = [-at.s * sin, at.s * cos];
	const pace = Math.hypot(vx, vy);
	const isTurning = pass.time > 0 && pass.time < swing.window && pass.time !== pass.postTime;
	// At an end of the window the distance, not the pass, is what changes.
	const size = Math.sign(pass.signed) * pass.distance;
	const normal =
		isTurning || pass.distance === 0
			? [-vy / pace, vx / pace]
			: [(x - target[0]) / size, (y - target[1]) / size];
	const along = (move: readonly number[]) =>
		entry(normal, 0) * entry(move, 0) + entry(normal, 1) * entry(move, 1);
	// A way cut off at the post ends sooner or later with the throw.
	const cut = pass.time === pass.postTime ? (x * vx + y * vy === 0 ? 0 : 1 / (x * vx + y * vy)) : 0;
	const slope = (move: readonly number[]) =>
		along(move) - along([vx, vy]) * cut * (x * entry(move, 0) + y * entry(move, 1));
	return [RAD_PER_DEG * slope(byAngle), slope(bySpeed)];
}
