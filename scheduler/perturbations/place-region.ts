import { scaleMatrix } from '../linear-algebra/matrix.ts';
import { subtract } from '../linear-algebra/vector.ts';
import type { Lean, PlacementGround } from './prepare-placement.ts';
import type { PlacedRegion } from './region-settings.ts';
import { weighShare, type Exit, type PlacementRung, type WeighedShare } from './weigh-share.ts';

export type RegionChoice =
	| { ok: true; region: PlacedRegion; nearest: Exit; rungs: readonly PlacementRung[] }
	| { ok: false; reason: 'no-exit'; rungs: readonly PlacementRung[] };

/**
 * Chooses the largest share of own next trials that a penalized region may catch while a way out stays
 * within reach.
 *
 * Units:   scaled; reach in own SD along the manifold.
 * Method:  for each share, high to low: region = next-trial ellipsoid; accepted when enough success
 *          leaks out without moving, and on one side the cloud, carried along the manifold, comes clear
 *          of the region with enough success and within the ranges, neither too near nor too far.
 * Decision: cloud, task, ranges and settings; no random numbers.
 * Source:  method sheet D2; case policy-placement-projectile, tests/reference/selector.test.ts.
 */
export function placeRegion(ground: PlacementGround, shares: readonly number[]): RegionChoice {
	return weighShares(ground, shares, { size: 0, axis: 0 }, 0);
}

/**
 * The same with the center moved off the mean along the manifold, nearest lean first, so that a region
 * fits where a centered one leaves no way out; with two free directions along the wider, then the other. It must still catch `catchMin` of the trials.
 */
export function placeLeaningRegion(
	ground: PlacementGround,
	options: { shares: readonly number[]; leans: readonly number[]; catchMin: number }
): RegionChoice {
	const rungs: PlacementRung[] = [];
	const leans = options.leans.flatMap((size) =>
		ground.directions.flatMap((_, axis) => [
			{ size, axis },
			{ size: -size, axis }
		])
	);
	for (const lean of leans) {
		const choice = weighShares(ground, options.shares, lean, options.catchMin);
		rungs.push(...choice.rungs);
		if (choice.ok) return { ...choice, rungs };
	}
	return { ok: false, reason: 'no-exit', rungs };
}

function weighShares(
	ground: PlacementGround,
	shares: readonly number[],
	lean: Lean,
	catchMin: number
): RegionChoice {
	const rungs: PlacementRung[] = [];
	for (const share of shares) {
		const weighed = weighShare(ground, share, lean);
		const { nearest } = weighed;
		if (!nearest) {
			rungs.push(weighed.rung);
			continue;
		}
		const region = describeRegion(ground, weighed, nearest);
		if (region.catch >= catchMin)
			return { ok: true, region, nearest, rungs: [...rungs, weighed.rung] };
		rungs.push({ ...weighed.rung, accepted: false, refusal: 'catches-too-little' });
		break;
	}
	return { ok: false, reason: 'no-exit', rungs };
}

function describeRegion(
	ground: PlacementGround,
	{ rung, center }: WeighedShare,
	nearest: Exit
): PlacedRegion {
	const { task, cloud, here, points } = ground;
	const offset = points.whiten(subtract(cloud.mean, center));
	const kSquared = rung.k ** 2;
	return {
		center: [...center],
		shape: scaleMatrix(cloud.cov, kSquared),
		centerInUnits: task.toUnits(center),
		share: rung.share,
		k: rung.k,
		stay: rung.staySuccess,
		hit0: here.hitShare,
		exitPlus: rung.exitPlus,
		exitMinus: rung.exitMinus,
		nearest: nearest.s,
		nearestSuccess: nearest.success,
		reachSd: Math.abs(nearest.s) / nearest.sd,
		lean: rung.lean,
		catch: rung.lean === 0 ? rung.share : points.countInside({ offset, kSquared }) / points.count,
		...(ground.isSurface ? { exitInUnits: task.toUnits(nearest.z) } : {})
	};
}
