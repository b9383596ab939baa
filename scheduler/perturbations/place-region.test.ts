import { describe, expect, it } from 'vitest';
import { createTask } from '../tasks/create-task.ts';
import { createScaledTask } from '../tasks/scaled-task.ts';
import { taskRecordSchema } from '../tasks/task-record.ts';
import { checkCatch, computeEscape, createRegionTest } from './escape-statistics.ts';
import { placeLeaningRegion, placeRegion } from './place-region.ts';
import { preparePlacement } from './prepare-placement.ts';
import { placementSettingsSchema } from './region-settings.ts';

const variable = (name: string, reach: number) => ({
	...{ name, unit: 'N', min: 10 - reach, max: 10 + reach, origin: 10, scale: 1 }
});
/** Two forces that must add to 20: the solutions are a straight line. */
const task = (tolerance: number, reach = 10) =>
	createScaledTask(
		createTask(
			taskRecordSchema.parse({
				...{ type: 'linear', coef: [1, 1], target: 20, tolerance, resultUnit: 'N' },
				variables: [variable('F1', reach), variable('F2', reach)]
			})
		)
	);
/** A cloud with this SD along and across the solutions. */
const cloud = (along: number, across: number) => {
	const [a, b] = [(along ** 2 + across ** 2) / 2, (across ** 2 - along ** 2) / 2];
	return {
		n: 60,
		mean: [0, 0],
		cov: [
			[a, b],
			[b, a]
		]
	};
};
const settings = placementSettingsSchema.parse({ pointCount: 512 });

function ground(scaled: ReturnType<typeof task>, own: ReturnType<typeof cloud>) {
	const prepared = preparePlacement({ task: scaled, cloud: own, settings });
	if (!prepared.ok) throw new RangeError(prepared.reason);
	return prepared.ground;
}

describe('placeRegion', () => {
	const choice = placeRegion(ground(task(1), cloud(1, 0.4)), settings.shares);

	it('takes the largest share with a way out', () => {
		expect(choice).toMatchObject({ ok: true, region: { share: 0.8, lean: 0, catch: 0.8 } });
	});

	it('has its two exits at equal distance on a straight line', () => {
		if (!choice.ok) throw new RangeError(choice.reason);
		const { exitPlus, exitMinus } = choice.region;
		expect(exitPlus).toBeCloseTo(-(exitMinus ?? NaN), 9);
	});

	it('never covers the place it expects the person to go to', () => {
		if (!choice.ok) throw new RangeError(choice.reason);
		expect(createRegionTest(choice.region)(choice.nearest.z)).toBe(false);
	});

	it('refuses every share when hardly a trial hits, and says why', () => {
		const none = placeRegion(ground(task(0.05), cloud(1, 1)), settings.shares);
		expect(none).toMatchObject({ ok: false, reason: 'no-exit' });
		expect(none.rungs.map(({ refusal }) => refusal)).toEqual(
			settings.shares.map(() => 'too-little-leaks')
		);
	});

	it('refuses an exit that would pile people up at a bound', () => {
		const free = placeRegion(ground(task(1, 10), cloud(1, 0.4)), [0.8]);
		const walled = placeRegion(ground(task(1, 3.2), cloud(1, 0.4)), [0.8]);
		expect([free.ok, walled.ok]).toEqual([true, false]);
		expect(walled.rungs[0]).toMatchObject({ exitPlus: null, exitMinus: null });
	});

	it('refuses a region that covers too much of the solutions', () => {
		const own = ground(task(1), cloud(1, 0.4));
		const strict = { ...own, settings: { ...settings, coverMax: 0.1 } };
		expect(placeRegion(strict, [0.8]).rungs[0]).toMatchObject({ refusal: 'covers-solutions' });
	});

	it('finds none on a short closed manifold', () => {
		const circle = createScaledTask(
			createTask(
				taskRecordSchema.parse({
					...{ type: 'formula', formula: 'x^2 + y^2 - 1', tolerance: 0.3, resultUnit: '' },
					variables: ['x', 'y'].map((name) => ({
						...{ name, unit: '', min: -3, max: 3, origin: 0, scale: 1 }
					}))
				})
			)
		);
		const own = {
			n: 60,
			mean: [1, 0],
			cov: [
				[1, 0],
				[0, 1]
			]
		};
		const choice = placeRegion(ground(circle, own), settings.shares);
		expect(choice.ok).toBe(false);
	});
});

describe('placeLeaningRegion', () => {
	it('moves the region off the mean and still catches enough', () => {
		const options = { shares: [0.8], leans: [0.25, 0.5], catchMin: 0.4 };
		const choice = placeLeaningRegion(ground(task(1), cloud(1, 0.4)), options);
		expect(choice).toMatchObject({ ok: true, region: { lean: 0.25 } });
		if (choice.ok) expect(choice.region.catch).toBeGreaterThan(0.4);
	});

	it('is refused when it would catch too little', () => {
		const options = { shares: [0.8], leans: [1], catchMin: 0.99 };
		const choice = placeLeaningRegion(ground(task(1), cloud(1, 0.4)), options);
		expect(choice.ok).toBe(false);
		expect(choice.rungs.map(({ refusal }) => refusal)).toContain('catches-too-little');
	});
});

describe('preparePlacement', () => {
	it('says when no solution is near', () => {
		const unreachable = createScaledTask(
			createTask(
				taskRecordSchema.parse({
					...{ type: 'formula', formula: 'x^2 + y^2 + 1', tolerance: 0.1, resultUnit: '' },
					variables: ['x', 'y'].map((name) => ({
						...{ name, unit: '', min: -3, max: 3, origin: 0, scale: 1 }
					}))
				})
			)
		);
		const prepared = preparePlacement({ task: unreachable, cloud: cloud(1, 0.5), settings });
		expect(prepared).toEqual({ ok: false, reason: 'no-solution-near' });
	});

	it('says when the cloud is flat', () => {
		const flat = {
			n: 60,
			mean: [0, 0],
			cov: [
				[1, 1],
				[1, 1]
			]
		};
		expect(preparePlacement({ task: task(1), cloud: flat, settings })).toEqual({
			...{ ok: false, reason: 'singular-cloud' }
		});
	});
});

describe('escape from a region', () => {
	const region = {
		center: [0, 0],
		shape: [
			[1, 0],
			[0, 1]
		],
		share: 0.8,
		stay: 0.2
	};
	const at = (z: [number, number], count: number) => new Array<number[]>(count).fill(z);

	it('is whole when every trial hits outside', () => {
		const executions = at([4, -4], 40);
		const escape = computeEscape({
			...{ task: task(1), executions, region, window: 40, z: 1.645 }
		});
		expect(escape).toMatchObject({ n: 40, solved: 40, outside: 1, relative: 1, upper: 1 });
	});

	it('is none when as many hit outside as would without moving', () => {
		const executions = [...at([0, 0], 32), ...at([4, -4], 8)];
		const escape = computeEscape({
			...{ task: task(1), executions, region, window: 40, z: 1.645 }
		});
		expect(escape.relative).toBeCloseTo(0, 12);
		expect(escape.relativeLow).toBeLessThan(0);
	});

	it('looks at the last trials only', () => {
		const executions = [...at([0, 0], 100), ...at([4, -4], 40)];
		const escape = computeEscape({
			...{ task: task(1), executions, region, window: 40, z: 1.645 }
		});
		expect(escape.outside).toBe(1);
	});

	it('tells when the catch was not the expected one', () => {
		expect(checkCatch(region, [...at([0, 0], 48), ...at([4, 4], 12)])).toMatchObject({
			...{ expected: 0.8, realised: 0.8, agrees: true }
		});
		expect(checkCatch(region, at([4, 4], 60)).agrees).toBe(false);
	});
});
