import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { diagonal } from '../linear-algebra/matrix.ts';
import { norm } from '../linear-algebra/vector.ts';
import { createTask } from './create-task.ts';
import { projectToManifold } from './project-to-manifold.ts';
import { createScaledTask } from './scaled-task.ts';
import { taskRecordSchema } from './task-record.ts';
import { computeCost } from './task.ts';
import { traceManifold } from './trace-manifold.ts';
import { traceSurface } from './trace-surface.ts';

const triple = ['ball', 'paddle', 'height'].map((name, i) => ({
	...{ name, unit: '', min: [-5, 0, -0.2][i] ?? 0, max: [-1, 3, 0.2][i] ?? 0 },
	...{ origin: [-3, 1, 0][i] ?? 0, scale: [0.15, 0.1, 0.02][i] ?? 1 }
}));

/** Every model with its own defaults, and some of their other forms. */
const RECORDS = [
	{ type: 'tethered-ball' },
	{ type: 'tethered-ball', relaxationTime: null },
	{ type: 'tethered-ball', postHit: 'truncate' },
	{ type: 'paddle-bounce' },
	{ type: 'paddle-bounce', variables: triple },
	{ type: 'throw-height' },
	{ type: 'throw-azimuth' },
	{ type: 'puck-push' },
	{ type: 'puck-friction' },
	{ type: 'two-finger' },
	{ type: 'arm-endpoint' },
	{ type: 'arm-x' },
	{ type: 'cart-pendulum' },
	{ type: 'cart-pendulum', measure: 'smoothness', target: 6000, tolerance: 600 }
];
const share = fc.double({ min: 0, max: 1, noNaN: true });
const shares = fc.tuple(share, share, share);

describe.each(RECORDS.map((record) => [JSON.stringify(record).slice(0, 60), record] as const))(
	'%s',
	(_name, raw) => {
		const record = taskRecordSchema.parse(raw);
		const task = createTask(record);
		const scaled = createScaledTask(task);
		const d = record.variables.length;
		const runs = { numRuns: record.type === 'cart-pendulum' ? 5 : 60 };
		const place = (at: readonly number[]) =>
			record.variables.map(({ min, max }, i) => min + (max - min) * (at[i] ?? 0));
		const start = projectToManifold({
			...{ task: scaled, mean: record.variables.map(() => 0) },
			covariance: diagonal(record.variables.map(() => 1))
		});

		it('has the Jacobian of its finite differences', () => {
			fc.assert(
				fc.property(shares, (at) => {
					const x = place(at);
					const jacobian = task.jacobian(x);
					record.variables.forEach(({ scale }, j) => {
						const step = 1e-4 * scale;
						const move = (sign: number) =>
							task.results(x.map((value, i) => (i === j ? value + sign * step : value)));
						const [up, down, here] = [move(1), move(-1), task.results(x)];
						here.forEach((result, k) => {
							const [a = NaN, b = NaN] = [up[k], down[k]];
							// The nearest pass may change over; there the result jumps.
							const isSmooth = Math.abs(a - 2 * result + b) * 100 < Math.abs(a - b) + 1e-7;
							if (![a, b, result].every(Number.isFinite) || !isSmooth) return;
							const slope = (jacobian[k]?.[j] ?? NaN) * scale;
							const difference = ((a - b) / (2 * step)) * scale;
							expect(Math.abs(slope - difference)).toBeLessThan(
								1e-4 * Math.max(1, Math.abs(slope))
							);
						});
					});
				}),
				runs
			);
		});

		it('says why an execution has no valid outcome, and gives no number for no result', () => {
			fc.assert(
				fc.property(shares, (at) => {
					const x = place(at);
					const cost = computeCost(task, x);
					const invalid = task.findInvalid(x);
					if (cost === null) expect(invalid).not.toBeNull();
					else expect(cost).toBeGreaterThanOrEqual(0);
					if (invalid !== null && cost !== null) expect(cost).toBeGreaterThan(task.tolerance);
				}),
				runs
			);
		});

		it('has a manifold whose points all solve it', { timeout: 20_000 }, () => {
			expect(start.ok).toBe(true);
			if (!start.ok) return;
			const isCurve = d - task.resultCount === 1;
			const step = record.type === 'cart-pendulum' ? 0.2 : 0.05;
			const points = isCurve
				? Object.values(traceManifold(scaled, start.point, { length: 2, step }))
						.flat()
						.filter(
							(point): point is { s: number; z: number[] } =>
								typeof point === 'object' && 'z' in point
						)
				: traceSurface(scaled, start.point, { reach: 2, spacing: 0.25 }).points;
			expect(points.length).toBeGreaterThan(isCurve ? 2 / step : 60);
			points.forEach(({ z }) => {
				expect(norm(task.results(scaled.toUnits(z)))).toBeLessThan(1e-6 * task.tolerance);
				expect(task.findInvalid(scaled.toUnits(z))).toBeNull();
			});
		});
	}
);
