import { describe, expect, it } from 'vitest';
import { dot, norm, quadraticForm, subtract } from '../linear-algebra/vector.ts';
import { drawNormalPoints } from './normal-points.test-data.ts';
import { createTask } from '../tasks/create-task.ts';
import { createScaledTask, type ScaledTask } from '../tasks/scaled-task.ts';
import { taskRecordSchema } from '../tasks/task-record.ts';
import { createRegionTest } from './escape-statistics.ts';
import { placeLeaningRegion, placeRegion } from './place-region.ts';
import { preparePlacement, type Cloud } from './prepare-placement.ts';
import { placementSettingsSchema } from './region-settings.ts';

const settings = placementSettingsSchema.parse({ pointCount: 1024 });
const variable = (name: string) => ({
	...{ name, unit: 'N', min: 0, max: 20, origin: 10, scale: 1 }
});
const identity = (n: number, s = 1) =>
	Array.from({ length: n }, (_, i) => Array.from({ length: n }, (_v, j) => (i === j ? s : 0)));

/** Three forces that must add to 30: the solutions are a plane. */
const plane = createScaledTask(
	createTask(
		taskRecordSchema.parse({
			...{ type: 'linear', coef: [1, 1, 1], target: 30, tolerance: 1, resultUnit: 'N' },
			variables: ['a', 'b', 'c'].map(variable)
		})
	)
);

/** Three joints that must bring the end of the arm to a place: the solutions are a curve. */
const arm = createScaledTask(
	createTask(taskRecordSchema.parse({ type: 'arm-endpoint', tolerance: 0.03 }))
);

function ground(task: ScaledTask, cloud: Cloud) {
	const prepared = preparePlacement({ task, cloud, settings });
	if (!prepared.ok) throw new RangeError(prepared.reason);
	return prepared.ground;
}

/** Share of a normal cloud at a place that hits outside a region, by other points than the engine's. */
function countSuccess(
	task: ScaledTask,
	{ mean, lower }: { mean: readonly number[]; lower: readonly (readonly number[])[] },
	isInside: (z: readonly number[]) => boolean
): number {
	const points = drawNormalPoints(4000, mean.length);
	const good = points.filter((point) => {
		const z = mean.map((value, i) => value + dot(lower[i] ?? [], point));
		return !isInside(z) && Math.abs(task.evaluate(z)) <= task.tolerance;
	});
	return good.length / points.length;
}

describe('a region among two free directions', () => {
	const own = ground(plane, { n: 60, mean: [0, 0, 0], cov: identity(3, 0.3) });
	const choice = placeRegion(own, settings.shares);

	it('has its exit where a round cloud comes clear of it, at k + 1.5 own SD', () => {
		if (!choice.ok) throw new RangeError(choice.reason);
		const { k, reachSd } = choice.region;
		// One spacing of the net (4.4 / 14 SD) and 5 % of the way.
		expect(reachSd).toBeGreaterThan(k + settings.exitWidth);
		expect(reachSd).toBeLessThan(1.05 * (k + settings.exitWidth) + 0.32);
	});

	it('names a place on the solutions, outside itself, with the success it promises', () => {
		if (!choice.ok) throw new RangeError(choice.reason);
		const exit = plane.toScaled(choice.region.exitInUnits ?? []);
		expect(plane.evaluate(exit)).toBeCloseTo(0, 9);
		const isInside = createRegionTest(choice.region);
		expect(isInside(exit)).toBe(false);
		const lower = identity(3, Math.sqrt(0.3));
		// Other points: three standard errors of a share of .6 in 4000 and 1024.
		expect(countSuccess(plane, { mean: exit, lower }, isInside)).toBeCloseTo(
			choice.region.nearestSuccess,
			1
		);
		expect(countSuccess(plane, { mean: [0, 0, 0], lower }, isInside)).toBeGreaterThanOrEqual(
			settings.leakMin - 0.03
		);
	});

	it('leans along the wider direction first, then along the other', () => {
		const cov = [
			[0.5, -0.2, 0],
			[-0.2, 0.5, 0],
			[0, 0, 0.2]
		];
		const wide = ground(plane, { n: 60, mean: [0, 0, 0], cov });
		expect(wide.sds[0]).toBeGreaterThan(wide.sds[1] ?? 9);
		const options = { shares: [0.8], leans: [0.5], catchMin: 0.999 };
		const { rungs } = placeLeaningRegion(wide, options);
		expect(rungs.map(({ lean, leanAxis = 0 }) => [lean, leanAxis])).toEqual([
			...[0.5, -0.5].map((lean) => [lean, 0]),
			...[0.5, -0.5].map((lean) => [lean, 1])
		]);
	});

	it('follows a curved surface', () => {
		const ball = createScaledTask(
			createTask(
				taskRecordSchema.parse({
					...{ type: 'formula', formula: 'sqrt(x^2 + y^2 + z^2) - 6', tolerance: 1 },
					resultUnit: '',
					variables: ['x', 'y', 'z'].map((name) => ({
						...{ name, unit: '', min: -12, max: 12, origin: 0, scale: 1 }
					}))
				})
			)
		);
		const placed = placeRegion(
			ground(ball, { n: 60, mean: [6, 0, 0], cov: identity(3, 0.3) }),
			settings.shares
		);
		if (!placed.ok) throw new RangeError(placed.reason);
		const exit = placed.region.exitInUnits ?? [];
		expect(norm(exit)).toBeCloseTo(6, 9);
		const straight = norm(subtract(exit, [6, 0, 0]));
		const arc = 12 * Math.asin(straight / 12);
		expect(Math.abs(placed.region.nearest)).toBeGreaterThan(0.999 * arc);
		expect(Math.abs(placed.region.nearest)).toBeLessThan(1.05 * arc);
	});
});

describe('a region in a task of two results', () => {
	const start = [0, 0, 0];
	const nearest = preparePlacement({
		...{ task: arm, settings },
		cloud: { n: 60, mean: start, cov: identity(3) }
	});

	it('finds the curve of postures with the same end of the arm', () => {
		if (!nearest.ok) throw new RangeError(nearest.reason);
		const { plus, minus, z0, directions, isSurface } = nearest.ground;
		expect([directions.length, isSurface]).toEqual([1, false]);
		for (const { z } of [...plus, ...minus]) expect(arm.evaluate(z)).toBeLessThan(1e-9);
		expect(plus.length + minus.length).toBeGreaterThan(100);
		expect(plus[0]?.z).toEqual(z0);
	});

	it('is placed on a cloud along those postures, with an exit that reaches the same place', () => {
		if (!nearest.ok) throw new RangeError(nearest.reason);
		const { z0, directions } = nearest.ground;
		const [t = []] = directions;
		const cov = t.map((a, i) => t.map((b, j) => 0.9 * a * b + (i === j ? 0.05 : 0)));
		const choice = placeRegion(ground(arm, { n: 60, mean: z0, cov }), settings.shares);
		if (!choice.ok) throw new RangeError(JSON.stringify(choice.rungs));
		const { region } = choice;
		expect(arm.evaluate(choice.nearest.z)).toBeLessThan(1e-9);
		expect(createRegionTest(region)(choice.nearest.z)).toBe(false);
		expect(region.stay).toBeGreaterThanOrEqual(settings.leakMin);
		expect(region.nearestSuccess).toBeGreaterThanOrEqual(settings.successMin);
		const sd = Math.sqrt(quadraticForm(cov, t));
		expect(region.reachSd).toBeCloseTo(Math.abs(region.nearest) / sd, 12);
		expect(region).not.toHaveProperty('exitInUnits');
	});

	it('is refused where nothing is free', () => {
		const pointed = { ...arm, variableCount: 2, resultCount: 2 };
		const cloud = { n: 60, mean: [0, 0], cov: identity(2) };
		expect(preparePlacement({ task: pointed, cloud, settings })).toEqual({
			...{ ok: false, reason: 'no-free-direction' }
		});
	});
});
