import { describe, expect, it } from 'vitest';
import { createTask } from '$scheduler/tasks/create-task';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import { getDefaultTask } from '../default-tasks';
import { drawCloud } from './draw-cloud';
import { computeRegionFacts, type Region } from './region-facts';

const puck = createTask(getDefaultTask('puck'));
const trials = drawCloud(puck, {
	...{ center: [2.486, 0.25], trials: 60, alongSd: 2, acrossSd: 0.6, seed: 7 }
});
const region: Region = {
	center: [2.55, 0.2],
	shape: [
		[0.02, -0.008],
		[-0.008, 0.009]
	]
};

/** Inverse of a 2 × 2 matrix, by hand. */
function invert([[a = 0, b = 0] = [], [c = 0, d = 0] = []]: readonly (readonly number[])[]) {
	const det = a * d - b * c;
	return { det, form: (x: number, y: number) => (d * x * x - (b + c) * x * y + a * y * y) / det };
}

/** Midpoint sums over a square of ± 8 SD: independent of the engine's way. */
function integrate(value: (x: number, y: number) => number, half: [number, number], steps = 1200) {
	const [hx, hy] = [(2 * half[0]) / steps, (2 * half[1]) / steps];
	let sum = 0;
	for (let i = 0; i < steps; i++)
		for (let j = 0; j < steps; j++)
			sum += value(-half[0] + (i + 0.5) * hx, -half[1] + (j + 0.5) * hy);
	return sum * hx * hy;
}

describe('numbers beside a penalized region', () => {
	const facts = computeRegionFacts({ plane: puck, planeRegion: region, region, trials });
	const inRegion = (x: number, y: number) => invert(region.shape).form(x - 2.55, y - 0.2) <= 1;

	it('holds the share of the normal cloud that a numeric integral gives, within 1 %', () => {
		const n = trials.length;
		const mean = [0, 1].map((k) => trials.reduce((sum, x) => sum + (x[k] ?? 0), 0) / n);
		const cov = [0, 1].map((i) =>
			[0, 1].map(
				(j) =>
					trials.reduce(
						(sum, x) => sum + ((x[i] ?? 0) - (mean[i] ?? 0)) * ((x[j] ?? 0) - (mean[j] ?? 0)),
						0
					) /
					(n - 1)
			)
		);
		const { det, form } = invert(cov);
		const mass = integrate(
			(dx, dy) => {
				if (!inRegion(2.55 + dx, 0.2 + dy)) return 0;
				const q = form(2.55 + dx - (mean[0] ?? 0), 0.2 + dy - (mean[1] ?? 0));
				return Math.exp(-q / 2) / (2 * Math.PI * Math.sqrt(det));
			},
			[0.15, 0.1]
		);
		expect(mass).toBeGreaterThan(0.1);
		expect((facts.cloudShare ?? NaN) / mass).toBeCloseTo(1, 2);
	});

	it('has the area and the hit area of a numeric integral, within 1 %', () => {
		const area = integrate((dx, dy) => (inRegion(2.55 + dx, 0.2 + dy) ? 1 : 0), [0.15, 0.1]);
		const hit = integrate(
			(dx, dy) => {
				const [v, x0] = [2.55 + dx, 0.2 + dy];
				if (!inRegion(v, x0)) return 0;
				return Math.abs(x0 + v ** 2 / (2 * 0.18 * 9.81) - 2) <= 0.12 ? 1 : 0;
			},
			[0.15, 0.1]
		);
		expect(facts.area / area).toBeCloseTo(1, 2);
		expect(hit).toBeGreaterThan(0.2 * area);
		expect(Math.abs(facts.hitArea / hit - 1)).toBeLessThan(0.01);
	});

	it('has the area of a strip cut out of a circle in closed form', () => {
		const record = { type: 'two-finger', target: 10, tolerance: 1 };
		const plane = createTask(taskRecordSchema.parse(record));
		const circle: Region = {
			center: [5, 5],
			shape: [
				[4, 0],
				[0, 4]
			]
		};
		const cloud = drawCloud(plane, {
			...{ center: [5, 5], trials: 40, alongSd: 1, acrossSd: 1, seed: 3 }
		});
		const found = computeRegionFacts({ plane, planeRegion: circle, region: circle, trials: cloud });
		const h = 1 / Math.SQRT2;
		const strip = 2 * (h * Math.sqrt(4 - h * h) + 4 * Math.asin(h / 2));
		expect(Math.abs(found.hitArea / strip - 1)).toBeLessThan(0.01);
		expect(found.area).toBeCloseTo(4 * Math.PI, 9);
	});

	it('counts the trials inside', () => {
		expect(facts.trialsInside).toBe(trials.filter(([v = 0, x = 0]) => inRegion(v, x)).length);
		expect(facts.trials).toBe(60);
	});
});
