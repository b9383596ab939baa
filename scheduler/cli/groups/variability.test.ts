import { describe, expect, it } from 'vitest';
import { PUCK_RECORD, spreadAlongManifold } from '../../policies/planted-trials.test-data.ts';
import { COMMANDS } from '../commands.ts';
import { runCommand } from '../run-command.ts';

const trials = spreadAlongManifold(40);
const later = trials.map(([v = 0, x = 0]) => [v + 0.05, x]);
const task = PUCK_RECORD;
const few = { interval: { replicates: 40 } };

/** The answer, checked against the shape that `--schema` prints. */
function ask(name: string, input: unknown): unknown {
	const { stdout, stderr, exitCode } = runCommand([name], () => JSON.stringify(input));
	expect([exitCode, stderr]).toEqual([0, '']);
	const answer: unknown = JSON.parse(stdout);
	expect(COMMANDS[name]?.output.safeParse(answer).error?.issues ?? []).toEqual([]);
	return answer;
}

function refuse(name: string, input: unknown): string {
	const { stderr, exitCode } = runCommand([name], () => JSON.stringify(input));
	expect(exitCode).toBe(2);
	return stderr;
}

describe('clouds on the command line', () => {
	it.each([
		{ method: 'trimmed' },
		{ method: 'mcd', starts: 50 },
		{ method: 'ogk' },
		{ method: 'ledoit-wolf' },
		{
			method: 'prior',
			covariance: [
				[0.1, 0],
				[0, 0.1]
			]
		}
	])('draws the ellipsoids of the estimate: $method', (estimate) => {
		const strays = trials.map((trial, i) => (i < 4 ? trial.map((x) => x * 3) : trial));
		const answer = ask('cloud', { task, trials: strays, estimate });
		expect(answer).toMatchObject({ n: 40, estimate: { ok: true, method: estimate.method } });
		expect(answer).toHaveProperty('ellipsoids.0.halfAxes');
		if (['trimmed', 'mcd', 'ogk'].includes(estimate.method))
			expect(answer).toMatchObject({
				estimate: { outliers: expect.arrayContaining([1, 2, 3, 4]) }
			});
	});

	it('says why there is no ellipsoid', () => {
		const flat = trials.map(([v = 0]) => [v, 0.25]);
		expect(ask('cloud', { task, trials: flat, estimate: { method: 'trimmed' } })).toMatchObject({
			...{ ellipsoids: null, estimate: { ok: false, reason: 'singular-covariance' } }
		});
		expect(
			refuse('cloud', { task, trials, estimate: { method: 'prior', covariance: [[1]] } })
		).toMatch(/estimate\.covariance must have 2 rows/);
	});

	it('measures how far two blocks lie apart, in two systems', () => {
		const answer = ask('overlap', { task, before: trials, after: later });
		expect(answer).toMatchObject({
			...{
				ok: true,
				separation: { isSeparate: false },
				distances: { affineInvariant: expect.closeTo(0, 9) }
			},
			secondSystem: {
				wasserstein: { ok: true, first: { system: 'scaled' }, second: { system: 'log' } }
			}
		});
		expect(ask('overlap', { task, before: trials, after: trials })).toMatchObject({
			...{ overlap: { bhattacharyyaCoefficient: 1 }, intersection: { jaccard: 1 } }
		});
	});

	it('gives the mass inside an ellipsoid', () => {
		const unit = [
			[1, 0],
			[0, 1]
		];
		const answer = ask('mass', {
			cloud: { mean: [0, 0], covariance: unit },
			region: {
				center: [0, 0],
				shape: [
					[4, 0],
					[0, 4]
				]
			}
		});
		// 1 − exp(−2).
		expect(answer).toMatchObject({ ok: true, probability: expect.closeTo(1 - Math.exp(-2), 10) });
		const region = { center: [0], shape: unit };
		expect(refuse('mass', { cloud: { mean: [0, 0], covariance: unit }, region })).toMatch(
			/^region\.center: must have the size of the mean, 2/
		);
	});

	it('splits an improvement, with intervals and a second system', () => {
		const answer = ask('decompose', { task, before: later, after: trials, ...few });
		expect(answer).toMatchObject({
			...{ ok: true, unit: 'm', decomposition: { standardError: 0 } },
			intervals: { tolerance: { ok: true, replicateCount: 40 } },
			secondSystem: { total: { ok: true, ratio: expect.closeTo(1, 6), hasSignFlip: false } },
			costs: { before: { isPairingExact: true } }
		});
	});

	it('measures variance along and across, alignment and sensitivity', () => {
		const input = { task, trials, ...few };
		expect(ask('ucm', input)).toMatchObject({
			ok: true,
			interval: { ok: true },
			compared: 'logRatio'
		});
		expect(ask('alignment', input)).toMatchObject({ ok: true, secondSystem: { ok: true } });
		const goal = ask('gem', { ...input, second: { kind: 'units' } });
		expect(goal).toMatchObject({ ok: true, series: { along: [{ lagOne: expect.any(Number) }] } });
		expect(goal).toMatchObject({ secondSystem: { second: { system: 'units' } } });
	});

	it('refuses a second system of variables that are not there', () => {
		const second = { kind: 'velocity', angle: 'phi', speed: 'v' };
		expect(refuse('ucm', { task, trials, second })).toMatch(/no variable “phi”/);
		expect(refuse('ucm', { task, trials: [[1, 2], [1]] })).toMatch(/^trials\[1\]: has 1 values/);
	});
});
