import { describe, expect, it } from 'vitest';
import { createTask } from './create-task.ts';
import { cutTask } from './cut-task.ts';
import { computeInvalidShare, evaluateResultMap, missAt, shiftResultMap } from './result-map.ts';
import { taskRecordSchema } from './task-record.ts';
import { traceLevel } from './trace-level.ts';

const tether = createTask(taskRecordSchema.parse({ type: 'tethered-ball' }));
const wide = { x: [-180, 180], y: [0.2, 7] } as const;

describe('result map', () => {
	it('holds what the task says at every point', () => {
		const map = evaluateResultMap(tether, wide, 13, 9);
		for (let j = 0; j < 9; j++)
			for (let i = 0; i < 13; i++) {
				const x = [-180 + 30 * i, 0.2 + (6.8 * j) / 8];
				expect(map.results[0]?.[j * 13 + i]).toBe(tether.results(x)[0]);
				expect(map.invalid[j * 13 + i]).toBe(tether.findInvalid(x) === null ? 0 : 1);
			}
		expect(computeInvalidShare(map)).toBeGreaterThan(0.2);
	});

	it('holds each of two results', () => {
		const arm = createTask(taskRecordSchema.parse({ type: 'arm-endpoint' }));
		const cut = cutTask(arm, [0, 2], [45, 60, 20]);
		const map = evaluateResultMap(cut, { x: [0, 90], y: [-70, 80] }, 3, 4);
		expect(map.results.map((list) => list[5])).toEqual(arm.results([90, 60, -20]));
		expect(missAt(map, 5)).toBeCloseTo(arm.evaluate([90, 60, -20]), 12);
	});

	it('follows a target that only shifts the result', () => {
		const at = (target: number) =>
			createTask(taskRecordSchema.parse({ type: 'two-finger', target }));
		const window = { x: [0, 20], y: [0, 20] } as const;
		const moved = shiftResultMap(evaluateResultMap(at(10), window, 5, 5), 2);
		const [list] = evaluateResultMap(at(12), window, 5, 5).results;
		expect([...(moved.results[0] ?? [])]).toEqual([...(list ?? [])]);
	});
});

describe('level of a result map', () => {
	it('lies where the result has the value, to a thousandth of the scale', () => {
		const map = evaluateResultMap(tether, wide, 121, 81);
		for (const level of [0, 0.05]) {
			const { lines } = traceLevel(map, level, (point) => tether.results(point)[0] ?? NaN);
			expect(lines.length).toBeGreaterThan(0);
			for (const point of lines.flat())
				expect(Math.abs((tether.results(point)[0] ?? NaN) - level)).toBeLessThan(2e-3);
		}
	});

	it('tells a jump of the sign from a passage through 0', () => {
		const step = createTask(
			taskRecordSchema.parse({
				...{ type: 'formula', formula: 'x / abs(x) + 0 * y', tolerance: 0.1, resultUnit: '' },
				variables: ['x', 'y'].map((name) => ({
					...{ name, unit: '', min: -1, max: 1, origin: 0, scale: 0.1 }
				}))
			})
		);
		const map = evaluateResultMap(step, { x: [-1, 1.1], y: [-1, 1] }, 8, 6);
		const { lines, jumps } = traceLevel(map, 0, (point) => step.evaluate(point));
		expect(lines).toEqual([]);
		expect(jumps.reduce((sum, flag) => sum + flag, 0)).toBe(5);
	});

	it('closes a loop', () => {
		const ring = createTask(
			taskRecordSchema.parse({
				...{ type: 'formula', formula: 'x^2 + y^2 - 0.5', tolerance: 0.1, resultUnit: '' },
				variables: ['x', 'y'].map((name) => ({
					...{ name, unit: '', min: -1, max: 1, origin: 0, scale: 0.1 }
				}))
			})
		);
		const map = evaluateResultMap(ring, { x: [-1, 1], y: [-1, 1] }, 41, 41);
		const { lines } = traceLevel(map, 0, (point) => ring.evaluate(point));
		expect(lines.length).toBe(1);
		expect(lines[0]?.[0]).toEqual(lines[0]?.at(-1));
		for (const [x, y] of lines[0] ?? []) expect(Math.hypot(x, y)).toBeCloseTo(Math.SQRT1_2, 3);
	});
});
