import type { CloudData, DrawnEllipse, Point } from '$lib/charts/cloud-data';
import { placeRegion } from '$scheduler/perturbations/place-region.ts';
import { preparePlacement, type Cloud } from '$scheduler/perturbations/prepare-placement.ts';
import {
	placementSettingsSchema,
	type PlacementSettings,
	type Region
} from '$scheduler/perturbations/region-settings.ts';
import type { Exit, PlacementRung } from '$scheduler/perturbations/weigh-share.ts';
import { createTask } from '$scheduler/tasks/create-task.ts';
import { evaluateErrorGrid } from '$scheduler/tasks/error-grid.ts';
import { createScaledTask, type ScaledTask } from '$scheduler/tasks/scaled-task.ts';
import { taskRecordSchema } from '$scheduler/tasks/task-record.ts';
import { traceZeroSet } from '$scheduler/tasks/trace-zero-set.ts';
import { computeNextTrialFactor } from '$scheduler/variability/ellipsoid-factors.ts';
import { computeCovariance, computeMeanVector } from '$scheduler/variability/moments.ts';
import { computeHitShare, simulateThrows } from './simulate-throws';

/** A drag-free throw at a target 2 m away and half a metre below the hand. */
const record = taskRecordSchema.parse({
	type: 'projectile',
	h: 1.5,
	D: 2,
	H: 1,
	g: 9.81,
	tolerance: 0.1,
	variables: [
		{ name: 'speed', unit: 'm/s', min: 3, max: 6, origin: 4.24, scale: 0.08 },
		{ name: 'angle', unit: '°', min: 20, max: 75, origin: 55.5, scale: 2 }
	]
});
const seed = 13;
const throwCount = 60;
/** Share of next throws that the solid oval holds. */
const ownShare = 0.68;
const window = { x: [3.7, 4.68], y: [40.5, 63] } as const;
const gridSteps = 72;
/** Covers of the zero-error line between which a person decides, as in the protocol pattern. */
export const coverLimits = { automaticMax: 0.3, neverAbove: 0.6 };

export interface Thrower {
	readonly cloud: CloudData;
	readonly throwCount: number;
	readonly distanceM: number;
	readonly toleranceCm: number;
	readonly hitShare: number;
	/** Share of own next throws inside the region. */
	readonly catchShare: number;
	/** Share of the reachable zero-error line inside the region. */
	readonly coverShare: number;
	/** How far the way out lies, in own SD along the line. */
	readonly reachSd: number;
	/** What one degree of angle costs, here and at the way out. */
	readonly hereCmPerDegree: number;
	readonly thereCmPerDegree: number;
}

/**
 * The picture of the front page: an invented person's throws and the region the engine places for them.
 *
 * Method:  the same calls as for a real block, with the product's defaults; a fixed seed.
 * @throws {Error} when the engine places no region, which the unit test would show first
 */
export function computeThrower(): Thrower {
	const task = createTask(record);
	const scaled = createScaledTask(task);
	const throws = simulateThrows(inventThrower(scaled), { count: throwCount, seed });
	const cloud = {
		n: throws.length,
		mean: computeMeanVector(throws),
		cov: computeCovariance(throws)
	};
	const settings = placementSettingsSchema.parse({});
	const { region, nearest, rung, reachSd } = place(scaled, cloud, settings);
	const costPerDegree = (z: readonly number[]) =>
		100 * Math.abs(task.gradient(scaled.toUnits(z))[1] ?? Number.NaN);
	return {
		cloud: draw({ scaled, cloud, throws, settings, region, nearest }),
		throwCount,
		distanceM: 2,
		toleranceCm: 100 * task.tolerance,
		hitShare: computeHitShare(scaled, throws),
		catchShare: region.share,
		coverShare: rung.cover ?? Number.NaN,
		reachSd,
		hereCmPerDegree: costPerDegree(cloud.mean),
		thereCmPerDegree: costPerDegree(nearest.z)
	};
}

/** Spread along the solutions three to four times that across them: a practised person. */
function inventThrower(scaled: ScaledTask) {
	const [bySpeed = 0, byAngle = 0] = scaled.gradient([0, 0]);
	const length = Math.hypot(bySpeed, byAngle);
	return {
		center: [0, 0] as const,
		along: [-byAngle / length, bySpeed / length] as const,
		sdAlong: 1.2,
		sdAcross: 0.35
	};
}

function place(
	task: ScaledTask,
	cloud: Cloud,
	settings: PlacementSettings
): { region: Region; nearest: Exit; rung: PlacementRung; reachSd: number } {
	const prepared = preparePlacement({ task, cloud, settings });
	if (!prepared.ok) throw new Error(`the front page’s thrower has no region: ${prepared.reason}`);
	const { ground } = prepared;
	const choice = placeRegion(ground, settings.shares);
	const rung = choice.rungs.at(-1);
	if (!choice.ok || !rung) throw new Error('the front page’s thrower has no way out');
	const { region, nearest } = choice;
	return { region, nearest, rung, reachSd: Math.abs(nearest.s) / nearest.sd };
}

function draw(found: {
	scaled: ScaledTask;
	cloud: Cloud;
	throws: readonly (readonly number[])[];
	settings: PlacementSettings;
	region: Region;
	nearest: Exit;
}): CloudData {
	const { scaled, cloud, region, nearest, settings } = found;
	const task = createTask(record);
	const factor = computeNextTrialFactor({
		trialCount: cloud.n,
		variableCount: 2,
		probability: ownShare
	});
	const point = (z: readonly number[]) => turn(scaled.toUnits(z));
	const ellipse = (z: readonly number[], shape: readonly (readonly number[])[], times = 1) => ({
		center: point(z),
		shape: turnShape(shape, times)
	});
	const ellipses: DrawnEllipse[] = [
		{ kind: 'own', ...ellipse(cloud.mean, cloud.cov, factor) },
		{
			kind: 'region',
			label: 'penalized region',
			detail: `catches ${Math.round(100 * region.share)} % of what they do now`,
			...ellipse(region.center, region.shape)
		},
		{
			kind: 'expected',
			label: 'expected way out',
			...ellipse(nearest.z, cloud.cov, settings.exitWidth ** 2)
		}
	];
	const grid = evaluateErrorGrid(task, window, gridSteps, gridSteps);
	return {
		x: { label: 'release angle', unit: '', tickSuffix: '°', domain: window.y },
		y: { label: 'release speed', unit: 'm/s', domain: window.x },
		grid: {
			x: grid.y,
			y: grid.x,
			values: grid.x.map((_, i) => grid.y.map((__, j) => round(grid.values[j]?.[i] ?? null)))
		},
		zeroSet: traceZeroSet(task, window, { cells: 48 }).map((line) => line.map(turn)),
		tolerance: task.tolerance,
		result: { unit: 'cm', factor: 100, below: 'under', above: 'over' },
		trials: found.throws.map(point),
		ellipses,
		arrow: { from: point(cloud.mean), to: point(nearest.z) }
	};
}

/** The picture has the angle to the right and the speed upwards. */
function turn([speed = Number.NaN, angle = Number.NaN]: readonly number[]): Point {
	return [angle, speed];
}

function turnShape(shape: readonly (readonly number[])[], times: number): DrawnEllipse['shape'] {
	const scales = record.variables.map(({ scale }) => scale);
	const at = (i: number, j: number) =>
		times * (shape[i]?.[j] ?? Number.NaN) * (scales[i] ?? 0) * (scales[j] ?? 0);
	return [
		[at(1, 1), at(1, 0)],
		[at(0, 1), at(0, 0)]
	];
}

/** A tenth of a millimetre is enough for a picture and keeps the page small. */
function round(value: number | null): number | null {
	return value === null ? null : Math.round(value * 1e4) / 1e4;
}
