import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { COMMANDS } from '../commands.ts';
import { runCommand } from '../run-command.ts';
import { manifoldSchema } from '../tasks/describe-manifold.ts';
import { readableTaskSchema } from '../trial-inputs.ts';

function run(name: string, input: unknown): unknown {
	const { stdout, stderr, exitCode } = runCommand([name], () => JSON.stringify(input));
	expect([exitCode, stderr]).toEqual([0, '']);
	const answer: unknown = JSON.parse(stdout);
	expect(COMMANDS[name]?.output.safeParse(answer).error?.issues ?? []).toEqual([]);
	return answer;
}

const manifold = (input: unknown) => manifoldSchema.parse(run('manifold', input));
const outcome = (task: object, x: number[]) => run('outcome', { task, trials: [x] });

const TYPES = [
	...['tethered-ball', 'paddle-bounce', 'throw-height', 'throw-azimuth', 'puck-push'],
	...['puck-friction', 'two-finger', 'arm-endpoint', 'arm-x']
];

describe('task models on the command line', () => {
	it.each([...TYPES, 'cart-pendulum'])('%s gives outcome and slopes with its defaults', (type) => {
		const task = { type };
		const { variables } = readableTaskSchema.parse(task);
		const trials = [variables.map(({ origin }) => origin)];
		expect(run('outcome', { task, trials })).toMatchObject({ trialCount: 1, invalid: [null] });
		expect(run('jacobian', { task, trials })).toMatchObject({
			trials: [{ isSingular: false, isSmooth: true, invalid: null }]
		});
	});

	it.each(TYPES)('%s has a manifold that its own outcome confirms', { timeout: 30_000 }, (type) => {
		const { found } = manifold({ task: { type }, length: 4, step: 0.2, spacing: 0.5 });
		expect(found.ok).toBe(true);
		if (!found.ok || found.kind === 'points') return;
		const points = found.kind === 'curves' ? found.branches.flatMap((b) => b.points) : found.points;
		expect(points.length).toBeGreaterThan(10);
		const trials = points.map(({ x }) => x);
		expect(run('outcome', { task: { type }, trials })).toMatchObject({ hitCount: trials.length });
	});

	it('shows a ball on the post as the penalty, and as no hit', () => {
		const task = { type: 'tethered-ball', target: [0, 1.1], postPenalty: 0.6 };
		expect(outcome(task, [90, 0.05])).toMatchObject({
			...{ hitCount: 0, costs: [0.6], invalid: ['post-hit'] }
		});
	});

	it('finds the angle at which any speed hits', () => {
		// The target lies where the ball comes to half a turn after release from 90 degrees.
		const task = {
			...{ type: 'tethered-ball', relaxationTime: null, pivot: [0, -1.5], arm: 0.4 },
			...{ target: [0, 1.1], tolerance: 0.05 }
		};
		const { degeneracies } = manifold({ task, start: [90, 3], length: 1 });
		expect(
			degeneracies.find(({ code }) => code === 'velocity-free-line')?.values['alphaDeg']
		).toBeCloseTo(90, 9);
	});

	it('closes a loop and says where a branch ends', () => {
		const variable = { unit: '', min: -2, max: 2, origin: 0, scale: 1 };
		const task = {
			...{ type: 'formula', formula: 'x^2 + y^2 - 1', tolerance: 0.1, resultUnit: '' },
			variables: ['x', 'y'].map((name) => ({ ...variable, name }))
		};
		const circle = manifold({ task }).found;
		expect(circle).toMatchObject({ ok: true, branches: [{ isClosed: true }] });
		const cross = manifold({ task: { ...task, formula: 'x*y - 1' } }).found;
		expect(cross).toMatchObject({
			branches: [1, 2].map(() => ({ isClosed: false, ends: { plus: 'range', minus: 'range' } }))
		});
	});

	it('says when there is nothing to trace', () => {
		const far = manifold({ task: { type: 'arm-endpoint', target: [2, 0] } });
		expect(far.found).toEqual({ ok: false, reason: 'no-solution-in-ranges' });
		expect(far.degeneracies[0]?.code).toBe('target-out-of-reach');
		const variable = { unit: '', min: -2, max: 2, origin: 0, scale: 1 };
		const variables = ['a', 'b', 'c', 'd'].map((name) => ({ ...variable, name }));
		const many = { type: 'linear', coef: [1, 1, 1, 1], target: 0, tolerance: 1, variables };
		expect(manifold({ task: many }).found).toMatchObject({
			reason: 'more-than-two-free-directions'
		});
	});

	it('says that a stretched arm is singular', () => {
		const task = { type: 'arm-endpoint', target: [0.5, 0.2] };
		expect(run('jacobian', { task, trials: [[30, 0, 0]] })).toMatchObject({
			trials: [{ rank: 1, freeCount: 2, isSingular: true, freeDirections: null }]
		});
	});

	it('says how bouncing stays steady', () => {
		const input = { restitution: 0.5, apex: 0.6, accelerations: [-2, 1] };
		expect(run('bouncing', input)).toMatchObject({
			...{ stable: [-10.9, 0], accelerations: [{ isStable: true }, { isStable: false }] },
			steady: { ok: true }
		});
		expect(run('bouncing', { apex: 0, impactHeight: 0.2 })).toMatchObject({
			steady: { ok: false, reason: 'apex-below-paddle' }
		});
	});

	it('maps the transport of a cart', { timeout: 30_000 }, () => {
		const range = { count: 2 };
		const input = {
			thetaDeg: { from: 0, to: 40, ...range },
			amplitude: { from: 0.05, to: 0.1, ...range },
			...{ strobe: true, turns: 2, windows: 3 }
		};
		const { cells } = z
			.object({ cells: z.array(z.array(z.record(z.string(), z.unknown()))) })
			.parse(run('transport-map', input));
		expect(cells.map((row) => row.length)).toEqual([2, 2]);
		expect(cells[0]?.[0]?.['strobedForces']).toHaveLength(6);
	});
});
