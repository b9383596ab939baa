import { describe, expect, it } from 'vitest';
import { PUCK_RECORD, spreadAlongManifold } from '../../policies/planted-trials.test-data.ts';
import { runCommand } from '../run-command.ts';

function run(name: string, input: unknown) {
	return runCommand([name], () => JSON.stringify(input));
}
function runJson(name: string, input: unknown): Record<string, unknown> {
	const { stdout, stderr, exitCode } = run(name, input);
	expect([exitCode, stderr]).toEqual([0, '']);
	return JSON.parse(stdout);
}

describe('policies on the command line', () => {
	it('steps a target shift and goes on from its state', () => {
		const rule = { sigma: 0.1, goal: 0.3 };
		const first = runJson('shift-step', { rule, errors: Array.from({ length: 9 }, () => 0) });
		expect(first['levels']).toEqual([0, 0, 0, 0, 0, 0, 0, 0, 0.1]);
		const more = { rule, state: first['state'], errors: Array.from({ length: 11 }, () => 0) };
		expect(runJson('shift-step', more)).toMatchObject({
			next: expect.closeTo(0.15, 12),
			log: [{ trial: 20, action: 'advance', rule: 'F1' }]
		});
		// Fewer than twelve trials are left in the day: no step.
		expect(runJson('shift-step', { ...more, leftToday: 11 })).toMatchObject({ next: 0.1, log: [] });
	});

	it('pairs people by their baselines', () => {
		const wide = spreadAlongManifold(30, { along: 2, across: 0.6 });
		const narrow = spreadAlongManifold(30, { along: 0.7, across: 0.2 });
		expect(
			runJson('yoke', {
				task: PUCK_RECORD,
				masters: [
					{ code: 'M1', trials: wide },
					{ code: 'M2', trials: narrow }
				],
				partners: [{ code: 'P1', trials: narrow }]
			})
		).toMatchObject({ pairs: [{ partner: 'P1', master: 'M2', distance: 0 }], unpaired: [] });
	});

	it('decides the block of a yoked partner and replays it', () => {
		const rule = {
			...{ kind: 'yoked', block: 0, nowHours: 50, previousEndHours: 30, gapMaxHours: 48 },
			master: { code: 'M1', blocks: [{ scoredAtHours: 20, kind: 'practice' }] }
		};
		const inputs = { task: PUCK_RECORD, state: { day: 1, blockInDay: 0 }, rule };
		const stored = runJson('decide', inputs);
		expect(stored).toMatchObject({ kind: 'practice', reasons: [{ code: 'YOKED' }] });
		expect(runJson('replay', { stored, inputs })).toEqual({ equal: true, sameVersions: true });
	});

	it('measures an escape', () => {
		const region = {
			center: [0, 0],
			shape: [
				[1, 0],
				[0, 1]
			],
			share: 0.8,
			stay: 0.1
		};
		expect(
			runJson('escape', { task: PUCK_RECORD, region, trials: spreadAlongManifold(60) })
		).toMatchObject({ ok: true, trialCount: 60, reentry: null });
	});

	it('simulates a study with the policy that would run it', { timeout: 30_000 }, () => {
		const report = runJson('simulate-study', {
			...{ task: PUCK_RECORD, days: 2, blocksPerDay: 3, seed: 4 },
			protocol: { place: { pointCount: 128 } },
			groups: [{ name: 'g', count: 2, traits: { motorAlong: 0.9, motorAcross: 0.35 } }]
		});
		expect(report).toMatchObject({
			groups: [{ name: 'g', sequences: [expect.stringMatching(/^b/), expect.any(String)] }]
		});
		expect(report).not.toHaveProperty('people');
	});

	it('reads a policy for what speaks against it', () => {
		expect(
			runJson('check-policy', {
				protocol: { shift: { rule: { firstStepSd: 0.5 } } },
				operatorsAreBlinded: false
			})
		).toMatchObject({ concerns: [{ code: 'FIRST-STEP-SMALL', isRefusal: true }] });
	});

	it.each([
		['shift-step', { rule: { sigma: 1, goal: 1 }, errors: [1], hits: [] }, /hits: one hit/],
		['yoke', { task: PUCK_RECORD, masters: [], partners: [] }, /masters: /],
		[
			'escape',
			{
				task: PUCK_RECORD,
				region: { center: [0], shape: [[1]], share: 0.8, stay: 0 },
				trials: [
					[1, 2],
					[1, 2],
					[1, 2]
				]
			},
			/region\.shape: each needs 2 values/
		],
		['check-policy', { protocol: { hysteresis: -1 } }, /protocol\.hysteresis: /]
	])('%s says what is wrong and where', (name, input, message) => {
		const { exitCode, stderr } = run(name, input);
		expect(exitCode).toBe(2);
		expect(stderr).toMatch(message);
	});
});
