import { subtract } from '../linear-algebra/vector.ts';
import { computeNextTrialFactor } from '../variability/ellipsoid-factors.ts';
import {
	computeLeaningCenter,
	squaredDistance,
	type Lean,
	type PlacementGround,
	type TracePoint
} from './prepare-placement.ts';

/** Why a share was refused. */
export type ShareRefusal =
	| 'too-little-leaks'
	| 'covers-solutions'
	| 'no-exit'
	| 'exit-too-near'
	| 'exit-too-far'
	| 'catches-too-little';

/** One share weighed: what a region of this size would have done. */
export interface PlacementRung {
	readonly share: number;
	readonly k: number;
	readonly lean: number;
	/** Which free direction it leans along, where that is not the one the cloud is widest along. */
	readonly leanAxis?: number;
	/** Arc length of the first way out on each side; null: none. */
	readonly exitPlus: number | null;
	readonly exitMinus: number | null;
	readonly staySuccess: number;
	/** Share of the traced manifold inside the region; null: not looked at. */
	readonly cover: number | null;
	readonly accepted: boolean;
	readonly refusal: ShareRefusal | null;
}

/** A place on the manifold to which the person can move. */
export interface Exit {
	readonly s: number;
	readonly z: readonly number[];
	readonly hit: number;
	/** SD of the cloud along the way there, scaled. */
	readonly sd: number;
	/** Share that hits outside the region there. */
	readonly success: number;
}

export interface WeighedShare {
	readonly rung: PlacementRung;
	readonly center: readonly number[];
	readonly nearest: Exit | null;
}

/**
 * What a region for this share of own next trials would do, and whether it is accepted.
 *
 * Source:  method sheet D2 step 4.
 */
export function weighShare(ground: PlacementGround, share: number, lean: Lean): WeighedShare {
	const { cloud, points, settings, here } = ground;
	const center = computeLeaningCenter(ground, lean);
	const kSquared = computeNextTrialFactor({
		trialCount: cloud.n,
		variableCount: cloud.mean.length,
		probability: share
	});
	const ball = { whiteCenter: points.whiten(center), kSquared };
	const staySuccess = computeSuccess(ground, { w: points.whiten(cloud.mean), carried: here }, ball);
	const plus = findExit(ground, ground.plus, ball);
	const minus = findExit(ground, ground.minus, ball);
	const cover = settings.coverMax === null ? null : computeCover(ground, ball);
	const { nearest, refusal } = judge(ground, { exits: [plus, minus], staySuccess, cover });
	return {
		center,
		nearest,
		rung: {
			...{ share, lean: lean.size, staySuccess, cover, refusal },
			...(lean.axis === 0 ? {} : { leanAxis: lean.axis }),
			k: Math.sqrt(kSquared),
			exitPlus: plus?.s ?? null,
			exitMinus: minus?.s ?? null,
			accepted: nearest !== null
		}
	};
}

/** The region as a ball in whitened coordinates. */
interface Ball {
	readonly whiteCenter: readonly number[];
	readonly kSquared: number;
}

/** First place on a branch where the carried cloud is clear of the region and does well enough. */
function findExit(ground: PlacementGround, branch: readonly TracePoint[], ball: Ball): Exit | null {
	const { settings, here } = ground;
	const clear = (Math.sqrt(ball.kSquared) + settings.exitWidth) ** 2;
	const floor = Math.max(settings.successMin, settings.successRelativeMin * here.hitShare);
	for (const { s, z, w, sd, carried } of branch.slice(1)) {
		if (!(squaredDistance(w, ball.whiteCenter) > clear)) continue;
		// A net of points is too many to carry the cloud to those that would be refused anyway.
		if (ground.isSurface && Math.abs(s) / sd > settings.reachMaxSd) continue;
		const cloud = carried();
		// The success outside the region cannot exceed the hits.
		if (cloud.hitShare < floor) continue;
		if (settings.edgeMax !== null && cloud.edgeShare() > settings.edgeMax) continue;
		const success = computeSuccess(ground, { w, carried: cloud }, ball);
		if (success >= floor) return { s, z, sd, hit: cloud.hitShare, success };
	}
	return null;
}

/** Share of the cloud at w that hits outside the ball. */
function computeSuccess(
	{ points }: PlacementGround,
	at: { w: readonly number[]; carried: { hits: readonly boolean[]; hitShare: number } },
	ball: Ball
): number {
	const lost = points.countInside({
		offset: subtract(at.w, ball.whiteCenter),
		kSquared: ball.kSquared,
		among: at.carried.hits
	});
	return (Math.round(at.carried.hitShare * points.count) - lost) / points.count;
}

/** Share of the traced manifold inside the region. */
function computeCover({ plus, minus }: PlacementGround, ball: Ball): number {
	const traced = [...plus, ...minus.slice(1)];
	const inside = traced.filter(
		({ w }) => squaredDistance(w, ball.whiteCenter) <= ball.kSquared
	).length;
	return inside / traced.length;
}

function judge(
	{ settings }: PlacementGround,
	found: { exits: readonly (Exit | null)[]; staySuccess: number; cover: number | null }
): { nearest: Exit | null; refusal: ShareRefusal | null } {
	const refuse = (refusal: ShareRefusal) => ({ nearest: null, refusal });
	if (found.staySuccess < settings.leakMin) return refuse('too-little-leaks');
	const exits = found.exits.filter((exit) => exit !== null);
	const reach = (exit: Exit) => Math.abs(exit.s) / exit.sd;
	const [nearest] = exits
		.filter((exit) => reach(exit) >= settings.reachMinSd && reach(exit) <= settings.reachMaxSd)
		.sort((a, b) => Math.abs(a.s) - Math.abs(b.s) || b.success - a.success);
	if (found.cover !== null && settings.coverMax !== null && found.cover > settings.coverMax)
		return refuse('covers-solutions');
	if (nearest) return { nearest, refusal: null };
	if (exits.length === 0) return refuse('no-exit');
	return refuse(
		exits.some((exit) => reach(exit) > settings.reachMaxSd) ? 'exit-too-far' : 'exit-too-near'
	);
}
