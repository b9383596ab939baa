import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createScaledTask } from '../../scaled-task.ts';
import { createTask } from '../../create-task.ts';
import { taskRecordSchema } from '../../task-record.ts';
import { traceManifold } from '../../trace-manifold.ts';
import { createSwingTable } from './nearest-pass.ts';
import { tetheredBallRecordSchema, type TetheredBallRecord } from './tether-record.ts';
import { computeTetherAlignment, solveUndampedSpeeds } from './tether-facts.ts';
import { computeSwingWeights, createTetherSwing, placeAt } from './tether-swing.ts';
import { createTetheredBall, followThrow } from './tethered-ball.ts';

const between = (min: number, max: number) => fc.double({ min, max, noNaN: true });
const place = fc.tuple(between(-1.2, 1.2), between(-1.2, 1.2));
const models = fc
	.record({
		k: between(0.5, 3),
		m: between(0.05, 0.3),
		relaxationTime: fc.oneof(fc.constant(null), between(1, 40)),
		target: place,
		ballRadius: between(0, 0.1)
	})
	.map((model) => tetheredBallRecordSchema.parse({ type: 'tethered-ball', ...model }));
const throws = { alpha: between(-Math.PI, Math.PI), speed: between(-6, 6) };

/** Distances of the ball from a point at very many times: slow and plain. */
function sampleOrbit(record: TetheredBallRecord, alpha: number, speed: number, count = 4000) {
	const swing = createTetherSwing(record);
	const { launch } = followThrow(record, createSwingTable(swing), alpha, speed);
	return Array.from({ length: count + 1 }, (_, i) => {
		const time = (swing.window * i) / count;
		const at = placeAt(launch, computeSwingWeights(swing, time));
		const target = Math.hypot(at[0] - record.target[0], at[1] - record.target[1]);
		return { time, target, center: Math.hypot(at[0], at[1]) };
	});
}

describe('tethered ball', () => {
	it('finds the least distance of the whole orbit', { timeout: 20_000 }, () => {
		fc.assert(
			fc.property(models, throws.alpha, throws.speed, (record, alpha, speed) => {
				const table = createSwingTable(createTetherSwing(record));
				const { distance } = followThrow(record, table, alpha, speed);
				const least = Math.min(...sampleOrbit(record, alpha, speed).map(({ target }) => target));
				expect(distance).toBeLessThanOrEqual(least + 1e-12);
				expect(distance).toBeGreaterThan(least - 1e-3);
			}),
			{ numRuns: 30 }
		);
	});

	it(
		'meets the post when the way to the nearest pass crosses it, and then first',
		{ timeout: 20_000 },
		() => {
			fc.assert(
				fc.property(models, throws.alpha, throws.speed, (record, alpha, speed) => {
					const table = createSwingTable(createTetherSwing(record));
					const pass = followThrow(record, table, alpha, speed);
					const radius = record.postRadius + record.ballRadius;
					const first = sampleOrbit(record, alpha, speed).find(
						({ time, center }) => time <= pass.time && center < radius
					);
					if (first && pass.postTime !== null) {
						expect(pass.postTime).toBeLessThanOrEqual(first.time + 1e-9);
						expect(pass.postTime).toBeGreaterThan(first.time - 1e-2);
					}
					// A graze of less than the sampling may be seen by one of the two only.
					const isGraze = Math.abs(pass.centerDistance - radius) < 1e-6;
					if (!isGraze) expect(pass.postTime !== null).toBe(first !== undefined);
				}),
				{ numRuns: 30 }
			);
		}
	);

	it('hits with both speeds of the closed form when nothing damps it', () => {
		fc.assert(
			fc.property(place, throws.alpha, (target, alpha) => {
				const model = { type: 'tethered-ball', relaxationTime: null, target };
				const record = tetheredBallRecordSchema.parse(model);
				const solved = solveUndampedSpeeds(record, alpha);
				if (!solved.ok) return;
				const table = createSwingTable(createTetherSwing(record));
				for (const { speed } of solved.solutions) {
					if (!(Math.abs(speed) < 50)) continue;
					expect(followThrow(record, table, alpha, speed).distance).toBeLessThan(1e-7);
				}
			})
		);
	});

	it('follows the closed form along the manifold', () => {
		const record = taskRecordSchema.parse({ type: 'tethered-ball', relaxationTime: null });
		if (record.type !== 'tethered-ball') return;
		const alpha = (120 * Math.PI) / 180;
		const solved = solveUndampedSpeeds(record, alpha);
		const task = createScaledTask(createTask(record));
		const start = task.toScaled([120, solved.ok ? solved.solutions[0].speed : Number.NaN]);
		const { plus, minus } = traceManifold(task, start, { length: 3, step: 0.1 });
		expect(plus.length + minus.length).toBeGreaterThan(12);
		for (const { z } of [...plus, ...minus]) {
			const [angle = 0, speed = 0] = task.toUnits(z);
			const there = solveUndampedSpeeds(record, (angle * Math.PI) / 180);
			const speeds = there.ok ? there.solutions.map((solution) => solution.speed) : [];
			expect(Math.min(...speeds.map((value) => Math.abs(value - speed)))).toBeLessThan(1e-6);
		}
	});

	it('hits at any speed from the angle of the velocity-free line, damped or not', () => {
		for (const relaxationTime of [null, 5]) {
			const swing = createTetherSwing({ k: 1, m: 0.1, relaxationTime, window: null });
			const decay = Math.exp((-swing.gamma * Math.PI) / swing.omegaD);
			const angle = (100 * Math.PI) / 180;
			const [x, y] = [0.4 * Math.cos(angle), -1.5 + 0.4 * Math.sin(angle)];
			const record = tetheredBallRecordSchema.parse({
				...{ type: 'tethered-ball', k: 1, m: 0.1, relaxationTime, arm: 0.4, pivot: [0, -1.5] },
				target: [-decay * x, -decay * y]
			});
			expect(computeTetherAlignment(record).freeAngleDeg).toBeCloseTo(100, 9);
			const model = createTetheredBall(record);
			for (const speed of [-5, -2, 1.5, 2, 4, 6]) {
				expect(Math.abs(model.results([100, speed])[0] ?? 1)).toBeLessThan(1e-9);
				expect(Math.abs(model.gradient([100, speed])[1] ?? 1)).toBeLessThan(1e-9);
			}
		}
	});

	it('cuts a way off at the post where that is asked for', () => {
		const model = { type: 'tethered-ball', target: [0, 1.1], postHit: 'truncate' };
		const record = tetheredBallRecordSchema.parse(model);
		const task = createTetheredBall(record);
		const cut = Math.abs(task.evaluate([90, 0.05]));
		// The ball is stopped below the post: at least the target's height above its lower edge away.
		expect(cut).toBeGreaterThan(1.1 + record.postRadius - 0.01);
		expect(task.findInvalid([90, 0.05])).toBeNull();
	});
});
