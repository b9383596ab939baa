import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createTask } from './create-task.ts';
import { cutTask } from './cut-task.ts';
import { evaluateErrorGrid } from './error-grid.ts';
import { computeTangent, projectToManifold } from './project-to-manifold.ts';
import { createScaledTask } from './scaled-task.ts';
import { taskRecordSchema, type TaskRecord } from './task-record.ts';
import { traceManifold } from './trace-manifold.ts';
import { traceZeroSet } from './trace-zero-set.ts';

const variable = (name: string, min: number, max: number, scale: number) => ({
	...{ name, unit: '', min, max, origin: (min + max) / 2, scale }
});
const parse = (record: object): TaskRecord => taskRecordSchema.parse({ tolerance: 0.1, ...record });
const RECORDS = {
	puck: parse({
		...{ type: 'puck', mu: 0.2, g: 9.81, D: 2 },
		variables: [variable('v', 0.5, 4, 0.1), variable('x0', -0.5, 1, 0.1)]
	}),
	projectile: parse({
		...{ type: 'projectile', h: 1.6, D: 5, H: 1.2, g: 9.81 },
		variables: [variable('v', 4, 10, 0.3), variable('theta_deg', 10, 65, 3)]
	}),
	linear: parse({
		...{ type: 'linear', coef: [1, 1], target: 10 },
		variables: [variable('F1', 0, 12, 1), variable('F2', 0, 12, 1)]
	}),
	formula: parse({
		...{ type: 'formula', formula: 'a*sin(b) + exp(a/4) - log(3 + b^2) - 1', resultUnit: '' },
		variables: [variable('a', 0.5, 2, 0.2), variable('b', 0.2, 1.4, 0.2)]
	})
};
const cases = Object.entries(RECORDS);
const share = fc.double({ min: 0, max: 1, noNaN: true });

function place(record: TaskRecord, shares: readonly number[]): number[] {
	return record.variables.map(({ min, max }, i) => min + (max - min) * (shares[i] ?? 0));
}

describe.each(cases)('task model %s', (_name, record) => {
	const task = createTask(record);
	const scaled = createScaledTask(task);
	const start = projectToManifold({
		...{
			task: scaled,
			mean: [0, 0],
			covariance: [
				[1, 0],
				[0, 1]
			]
		}
	});

	it('has the gradient of its finite differences', () => {
		fc.assert(
			fc.property(fc.tuple(share, share), (shares) => {
				const x = place(record, shares);
				task.gradient(x).forEach((slope, i) => {
					const step = 1e-5 * Math.max(1, Math.abs(x[i] ?? 0));
					const at = (sign: number) =>
						task.evaluate(x.map((v, j) => (j === i ? v + sign * step : v)));
					const difference = (at(1) - at(-1)) / (2 * step);
					expect(Math.abs(slope - difference)).toBeLessThan(1e-6 * Math.max(1, Math.abs(slope)));
				});
			})
		);
	});

	it('traces points that all solve it, one step apart, on both sides', () => {
		expect(start.ok).toBe(true);
		if (!start.ok) return;
		const trace = traceManifold(scaled, start.point, { length: 2, step: 0.02 });
		for (const branch of [trace.plus, trace.minus]) {
			expect(branch.length).toBeGreaterThan(1);
			branch.forEach(({ z }) => expect(Math.abs(scaled.evaluate(z))).toBeLessThan(1e-12));
			branch.slice(1).forEach(({ z }, i) => {
				const before = branch[i]?.z ?? [];
				const apart = Math.hypot(...z.map((value, j) => value - (before[j] ?? NaN)));
				expect(apart).toBeCloseTo(0.02, 3);
			});
		}
	});

	it('has a tangent along which the result does not change', () => {
		if (!start.ok) return;
		const [t1 = 0, t2 = 0] = computeTangent(scaled, start.point) ?? [];
		const [g1 = 0, g2 = 0] = scaled.gradient(start.point);
		expect(Math.abs(t1 * g1 + t2 * g2)).toBeLessThan(1e-12);
	});

	it('draws a zero set whose points solve it', () => {
		const window = {
			x: [record.variables[0]?.min ?? 0, record.variables[0]?.max ?? 1] as const,
			y: [record.variables[1]?.min ?? 0, record.variables[1]?.max ?? 1] as const
		};
		const lines = traceZeroSet(task, window, { cells: 40 });
		expect(lines.length).toBeGreaterThan(0);
		lines.flat().forEach((point) => expect(Math.abs(task.evaluate(point))).toBeLessThan(1e-6));
	});
});

describe('pictures of a task', () => {
	const circle = createTask(
		parse({
			...{ type: 'formula', formula: 'x^2 + y^2 - 1', resultUnit: 'm' },
			variables: [variable('x', -2, 2, 1), variable('y', -2, 2, 1)]
		})
	);

	it('closes a closed zero set', () => {
		const [line = [], ...others] = traceZeroSet(circle, { x: [-2, 2], y: [-2, 2] }, { cells: 50 });
		expect(others).toHaveLength(0);
		expect(line.at(-1)).toEqual(line[0]);
		line.forEach(([x, y]) => expect(Math.hypot(x, y)).toBeCloseTo(1, 6));
	});

	it('draws the band of the tolerance', () => {
		const lines = traceZeroSet(circle, { x: [-2, 2], y: [-2, 2] }, { cells: 50, level: 0.5 });
		lines.flat().forEach(([x, y]) => expect(Math.hypot(x, y)).toBeCloseTo(Math.sqrt(1.5), 6));
	});

	it('draws no line where the result jumps', () => {
		const pole = createTask(
			parse({
				...{ type: 'formula', formula: '1/x', resultUnit: '' },
				variables: [variable('x', -2, 2, 1), variable('y', -2, 2, 1)]
			})
		);
		expect(traceZeroSet(pole, { x: [-1.05, 1], y: [-1, 1] })).toEqual([]);
	});

	it('maps the error with null where there is none', () => {
		const root = createTask(
			parse({
				...{ type: 'formula', formula: 'sqrt(x) - y', resultUnit: '' },
				variables: [variable('x', -1, 1, 1), variable('y', -1, 1, 1)]
			})
		);
		const grid = evaluateErrorGrid(root, { x: [-1, 1], y: [0, 1] }, 3, 2);
		expect(grid).toEqual({
			x: [-1, 0, 1],
			y: [0, 1],
			values: [
				[null, 0, 1],
				[null, -1, 0]
			]
		});
	});

	it('cuts a task of three variables to two', () => {
		const three = createTask(
			parse({
				...{ type: 'linear', coef: [1, 2, 3], target: 0 },
				variables: ['a', 'b', 'c'].map((name) => variable(name, -9, 9, 1))
			})
		);
		const cut = cutTask(three, [2, 0], [0, 10, 0]);
		expect(cut.evaluate([1, 5])).toBe(3 + 20 + 5);
		expect(cut.gradient([1, 5])).toEqual([3, 1]);
		expect(cut.variables.map(({ name }) => name)).toEqual(['c', 'a']);
	});
});
