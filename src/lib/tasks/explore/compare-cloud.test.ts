import { describe, expect, it } from 'vitest';
import { createTask } from '$scheduler/tasks/create-task';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import { getDefaultTask } from '../default-tasks';
import { taskTypes } from '../task-models';
import { compareCloud } from './compare-cloud';
import { drawCloud } from './draw-cloud';
import { computeForgiveness } from './forgiveness';
import { listSecondSystems } from './second-systems';

const types = taskTypes.filter((type) => type !== 'formula' && type !== 'cart-pendulum');

describe('one cloud in two coordinate systems', () => {
	it.each(types)('of %s keeps its misses and its trials', (type) => {
		const record = getDefaultTask(type);
		const task = createTask(record);
		const center = record.variables.map(({ origin }) => origin);
		const trials = drawCloud(task, { center, trials: 24, alongSd: 1.5, acrossSd: 0.4, seed: 5 });
		for (const { system, axes } of listSecondSystems(record)) {
			expect(axes.length).toBe(record.variables.length);
			const found = compareCloud({ record, trials, axes: [0, 1], system });
			expect(found.secondTrials?.length).toBe(24);
			found.secondTrials?.forEach((z, k) =>
				system.toUnits(z).forEach((value, i) => expect(value).toBeCloseTo(trials[k]?.[i] ?? NaN, 6))
			);
			expect(found.meanMiss).toBeGreaterThan(0);
			expect(found.noise.first).not.toBeNull();
		}
	});

	it('finds no covariation to gain once speed is written as its square', () => {
		// In x₀ + k·v² the pairing that cancels is the same, but the noise is symmetric there.
		const record = getDefaultTask('puck');
		const [square] = listSecondSystems(record);
		const trials = drawCloud(createTask(record), {
			...{ center: [2.486, 0.25], trials: 60, alongSd: 2, acrossSd: 0.5, seed: 9 }
		});
		if (!square) throw new Error('no second system');
		const found = compareCloud({ record, trials, axes: [0, 1], system: square.system });
		// The best pairing only pairs values: written as squares they are the same values.
		expect(found.covariation.second).toBeCloseTo(found.covariation.first ?? NaN, 9);
		expect(found.noise.second).not.toBeCloseTo(found.noise.first ?? NaN, 6);
	});

	it('takes the covariation away that depends on the axes', () => {
		const record = getDefaultTask('two-finger');
		const trials = drawCloud(createTask(record), {
			...{ center: [5, 5], trials: 80, alongSd: 2, acrossSd: 0.5, seed: 1 }
		});
		const sum = listSecondSystems(record).find(({ key }) => key === 'sum');
		if (!sum) throw new Error('no sum');
		const found = compareCloud({ record, trials, axes: [0, 1], system: sum.system });
		expect(found.correlation.first).toBeLessThan(-0.7);
		expect(Math.abs(found.correlation.second ?? 1)).toBeLessThan(0.25);
		// The result is the sum: how it is paired with the difference does not matter at all.
		expect(found.covariation.second).toBeCloseTo(0, 12);
		expect(found.covariation.first).toBeGreaterThanOrEqual(0);
		// Equal scales, axes turned by 45°: the spread along and across stays.
		expect(found.alongAcross.second).toBeCloseTo(found.alongAcross.first ?? NaN, 6);
	});

	it('says where a system cannot write a trial', () => {
		const record = getDefaultTask('tethered-ball');
		const [velocity] = listSecondSystems(record);
		if (!velocity) throw new Error('no velocity');
		const trials = [
			[100, 2],
			[110, -2],
			[105, 3]
		];
		const found = compareCloud({ record, trials, axes: [0, 1], system: velocity.system });
		expect(found.secondTrials).toBeNull();
		expect(found.covariation.second).toBeNull();
		expect(found.covariation.first).not.toBeNull();
	});
});

describe('what a line forgives', () => {
	it('is the same all along a straight line of equal slopes', () => {
		const task = createTask(getDefaultTask('two-finger'));
		const trials = drawCloud(task, {
			...{ center: [5, 5], trials: 50, alongSd: 1, acrossSd: 1, seed: 2 }
		});
		const branch = Array.from({ length: 30 }, (_, k) => [2 + 0.2 * k, 8 - 0.2 * k]);
		const [found = []] = computeForgiveness(task, trials, [branch]);
		expect(new Set(found.map(({ share }) => share)).size).toBe(1);
		expect(found.at(-1)?.length).toBeCloseTo((5.8 * Math.SQRT2) / 0.5, 9);
	});

	it('grows where the same cloud matters less', () => {
		const record = taskRecordSchema.parse({ ...getDefaultTask('puck'), tolerance: 0.06 });
		const task = createTask(record);
		const trials = drawCloud(task, {
			...{ center: [2.486, 0.25], trials: 200, alongSd: 0, acrossSd: 1, seed: 4 }
		});
		const k = 1 / (2 * 0.18 * 9.81);
		const branch = Array.from({ length: 20 }, (_, i) => {
			const v = 1.8 + 0.04 * i;
			return [v, 2 - k * v * v];
		});
		const [found = []] = computeForgiveness(task, trials, [branch]);
		expect(found[0]?.share).toBeGreaterThan((found.at(-1)?.share ?? 1) + 0.05);
	});
});
