import { describe, expect, it } from 'vitest';
import { runCommand } from '../run-command.ts';

function run(name: string, input: unknown) {
	return runCommand([name], () => JSON.stringify(input));
}
function runJson(name: string, input: unknown): unknown {
	const { stdout, stderr, exitCode } = run(name, input);
	expect([exitCode, stderr]).toEqual([0, '']);
	return JSON.parse(stdout);
}
const times = Array.from({ length: 24 }, (_, i) => i + 1);
const values = times.map((t) => 0.3 + Math.exp(-0.2 * t) + 0.01 * Math.sin(7 * t));

describe('learning on the command line', () => {
	it('fits the best form and names how the others compare', () => {
		expect(runJson('fit-curve', { times, values })).toMatchObject({
			...{ ok: true, curve: 'exponential' },
			parameters: [{ name: 'A' }, { name: 'B' }, { name: 'k', value: expect.closeTo(0.2, 1) }],
			compared: expect.arrayContaining([{ curve: 'power', aicc: expect.any(Number) }])
		});
	});

	it('fits a formula from start values', () => {
		const curve = { formula: 'A + B*exp(-k*t)', start: { A: 0, B: 1, k: 0.1 } };
		expect(runJson('fit-curve', { times, values, curve, level: null })).toMatchObject({
			parameters: [{ interval: null }, { interval: null }, { interval: null }]
		});
	});

	it('judges a plateau', () => {
		const blocks = [1, 1.01, 0.99, 1, 1.01, 0.99].map((mean) => ({ mean, sd: 1, trialCount: 60 }));
		expect(runJson('plateau', { blocks })).toMatchObject({ verdict: { verdict: 'plateau' } });
	});

	it('runs each learner', () => {
		expect(
			runJson('learn', { learner: 'single-rate', retention: 1, rate: 0.5, perturbations: [1, 1] })
		).toEqual({ states: [0, 0.5, 0.75], errors: [1, 0.5], residual: 0 });
		const steps = [
			{ trials: 2, perturbation: 1 },
			{ trials: 1, clampedError: 0 },
			{ gapHours: 24 }
		];
		const run = runJson('learn', { learner: 'two-rate', steps });
		expect(Reflect.get(Object(run), 'states')).toHaveLength(5);
		const zone = { rewardZone: [0, 1], rate: 1, explore: 'always' };
		expect(
			runJson('learn', { learner: 'reward', exploration: [0.5], motorNoise: [0], ...zone })
		).toEqual({ aims: [0, 0.5], rewards: [true] });
	});

	it.each([
		['fit-curve', { times, values: values.slice(1) }, /values: 23 values for 24 times/],
		['fit-curve', { times, values, curve: { formula: 'A +', start: { A: 1 } } }, /curve\.formula/],
		['plateau', { blocks: [] }, /blocks: /],
		['learn', { learner: 'single-rate', retention: 2, rate: 0.1, perturbations: [1] }, /retention/]
	])('%s says what is wrong and where', (name, input, message) => {
		const { exitCode, stderr } = run(name, input);
		expect(exitCode).toBe(2);
		expect(stderr).toMatch(message);
	});
});
