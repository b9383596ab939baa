import { describe, expect, it } from 'vitest';
import { runCommand } from '../run-command.ts';
import { ALLOCATION_COMMANDS } from './allocation.ts';
import { STATISTICS_COMMANDS } from './statistics.ts';

const COMMANDS = { ...STATISTICS_COMMANDS, ...ALLOCATION_COMMANDS };
const SEED = '0a'.repeat(32);

/** Runs a command and checks its answer against the shape it promises. */
function run(name: string, input: unknown) {
	const { stdout, stderr, exitCode } = runCommand([name], () => JSON.stringify(input));
	expect([exitCode, stderr]).toEqual([0, '']);
	const answer = JSON.parse(stdout);
	COMMANDS[name]?.output.parse(answer);
	return answer;
}

describe('statistics on the command line', () => {
	it('gives tails and quantiles; without end is null', () => {
		const got = run('distribution', { distribution: 't', df: 7, p: [0.975, 1], at: [2.5] });
		expect(got.quantiles[0].x).toBeCloseTo(2.364624251593, 10);
		expect(got.quantiles[1].x).toBeNull();
		expect(got.points[0].lower + got.points[0].upper).toBeCloseTo(1, 14);
	});

	it.each([
		{ distribution: 'normal' },
		{ distribution: 't', df: 5.5, ncp: 1.2 },
		{ distribution: 'chi-square', df: 3.3 },
		{ distribution: 'chi-square', df: 3.3, ncp: 2 },
		{ distribution: 'f', df1: 2.5, df2: 9 },
		{ distribution: 'f', df1: 2.5, df2: 9, ncp: 4 },
		{ distribution: 'gamma', shape: 0.7, rate: 2 },
		{ distribution: 'beta', a: 2, b: 0.5 }
	])('$distribution: quantiles lead back to their tails', (shape) => {
		const { quantiles, upperQuantiles } = run('distribution', {
			...{ ...shape, p: [0.1, 0.6], upperTail: [0.4, 0.01] }
		});
		const at = [...quantiles, ...upperQuantiles].map(({ x }: { x: number }) => x);
		const { points } = run('distribution', { ...shape, at });
		const tails = points.map(({ lower }: { lower: number }) => lower);
		[0.1, 0.6, 0.6, 0.99].forEach((p, i) => expect(tails[i]).toBeCloseTo(p, 9));
	});

	it.each([
		[{ design: 'two-sample', effectSize: 0.5 }, 64],
		[{ design: 'paired', effectSize: 0.5 }, 34],
		[{ design: 'welch', difference: 1.2, sd1: 1, sd2: 2, ratio: 1.5 }, 21],
		[{ design: 'anova', groupCount: 3, f: 0.25 }, 53],
		[
			{
				...{ design: 'mixed-anova', groupCount: 2, measurementCount: 4, correlation: 0.5 },
				...{ f: 0.25, effect: 'interaction' }
			},
			12
		],
		[{ design: 'ancova', effectSize: 0.5, correlation: 0.6 }, 42],
		[
			{
				...{ design: 'slope', slopeDifference: 0.3, times: [0, 1, 2, 3, 4, 5] },
				...{ slopeSd: 0.4, residualSd: 1 }
			},
			39
		],
		[{ design: 'proportions', p1: 0.5, p2: 0.75 }, 58],
		[{ design: 'equivalence', trueDifference: 0, sd: 1, lowerMargin: -0.8, upperMargin: 0.8 }, 28]
	])('finds the n of a power, %j', (design, least) => {
		const { required, points } = run('power', { ...design, power: 0.8, n: [20], lossShare: 0.1 });
		expect(required).toMatchObject({ ok: true });
		expect(Math.abs(required.n - least)).toBeLessThanOrEqual(1);
		const around = run('power', { ...design, n: [required.n - 1, required.n] }).points;
		expect(around[0].power).toBeLessThan(0.8);
		expect(around[1].power).toBeGreaterThanOrEqual(0.8);
		expect(points[0].powerWithLosses).toBeLessThan(points[0].power);
	});

	it('runs each test', () => {
		const [first, second] = [
			[1, 2, 4, 3.5],
			[2, 3, 4, 9]
		];
		for (const test of ['paired', 'pooled', 'welch'])
			expect(run('test', { test, first, second, alternative: 'less' })).toMatchObject({
				...{ ok: true, interval: { lower: null } }
			});
		expect(run('test', { test: 'one-sample', values: first, nullValue: 1 }).ok).toBe(true);
		expect(run('test', { test: 'one-way', groups: [first, second] }).test.df2).toBe(6);
		const people = [first, second, [2, 2, 1, 3], [3, 5, 5, 6]].map((values, i) => ({
			...{ group: i % 2, values }
		}));
		expect(run('test', { test: 'mixed', people }).within.df1).toBe(3);
		const covariance = { test: 'covariance', y: [1, 2, 2, 4, 6, 5], group: [0, 0, 0, 1, 1, 1] };
		const adjusted = run('test', { ...covariance, covariates: [[1, 2, 3, 2, 3, 4]] });
		expect(adjusted.differences).toHaveLength(1);
		const margins = { lowerMargin: -3, upperMargin: 3, design: 'pooled' };
		expect(run('test', { test: 'equivalence', first, second, ...margins }).ok).toBe(true);
		const shares = { test: 'proportions', successes: [3, 9], trials: [10, 12] };
		expect(run('test', shares).difference).toBeCloseTo(-0.45, 12);
		expect(run('test', { test: 'one-sample', values: [2, 2] })).toEqual({
			...{ ok: false, reason: 'no-variance' }
		});
	});

	it('fits a mixed model of named columns', () => {
		const got = run('mixed-model', {
			formula: 'y ~ day * arm + (1 | id)',
			data: {
				y: [1, 2, 3, 2, 3.5, 3, 1, 3, 2, 4, 5, 5],
				day: [0, 1, 2, 0, 1, 2, 0, 1, 2, 0, 1, 2],
				arm: ['a', 'a', 'a', 'b', 'b', 'b', 'a', 'a', 'a', 'b', 'b', 'b'],
				id: ['p', 'p', 'p', 'q', 'q', 'q', 'r', 'r', 'r', 's', 's', 's']
			}
		});
		const names = got.fixedEffects.map(({ name }: { name: string }) => name);
		expect(names).toEqual(['intercept', 'day', 'arm=b', 'day:arm=b']);
		expect(got.fixedEffects[1].satterthwaite.df).toBeCloseTo(6, 5);
	});

	it('plans looks, adjusts, counts and re-estimates', () => {
		const looks = run('boundaries', { spending: 'obrien-fleming', information: [0.001, 0.5, 1] });
		expect(looks.looks[0].z).toBeNull();
		expect(looks.looks[1].z).toBeCloseTo(2.9625880427, 6);
		const classical = run('boundaries', { spending: 'none', lookCount: 5, shape: 0 });
		expect(classical.looks[0].z).toBeCloseTo(2.4132, 3);
		expect(run('adjust', { p: [0.01, 0.04] }).holm).toEqual([0.02, 0.04]);
		const dunnett = run('adjust', {
			controlSize: 9,
			treatmentSizes: [9, 9],
			df: 24,
			t: [2.5, 0.1]
		});
		expect(dunnett.p[0]).toBeLessThan(0.05);
		expect(run('interval', { successCount: 17, trialCount: 24 }).wilson.lower).toBeCloseTo(
			0.5083,
			4
		);
		expect(run('counts', { p: 0.8, halfWidth: 0.01 })).toEqual({ replicates: 6147 });
		expect(run('counts', { completersNeeded: 40, lossShare: 0.2 })).toEqual({ toEnrol: 50 });
		expect(run('counts', { effectiveCount: 100, clusterSize: 5, icc: 0.5 }).totalCount).toBe(300);
		expect(run('reestimate', { pooledValues: [1, 2, 3, 4], difference: 1 }).ok).toBe(true);
	});

	it.each([
		['power', { design: 'paired', effectSize: 1 }, /^n: say n/],
		['distribution', { distribution: 't', df: -1 }, /^df: /],
		['interval', { successCount: 3, trialCount: 2 }, /^successCount: /],
		['mixed-model', { formula: 'y ~ x', data: { y: [1], x: [1, 2] } }, /^data\.x: has 2 values/],
		['mixed-model', { formula: 'y ~ 1', data: { y: [1, 2, 3] } }, /no random term/],
		['boundaries', { spending: 'pocock', information: [0.5, 0.4] }, /information must rise/]
	])('%s says where an input is wrong', (name, input, message) => {
		const { exitCode, stderr, stdout } = runCommand([name], () => JSON.stringify(input));
		expect([exitCode, stdout]).toEqual([2, '']);
		expect(stderr).toMatch(message);
	});

	it('prints a schema of every command', () => {
		for (const name of Object.keys(COMMANDS)) {
			const { stdout } = runCommand([name, '--schema'], () => '');
			expect(Object.keys(JSON.parse(stdout))).toEqual(['input', 'output']);
		}
	});
});

describe('allocation on the command line', () => {
	const arms = [{ id: 'A' }, { id: 'B' }];

	it('gives the same arms for the same seed, balanced within strata', () => {
		const input = {
			...{ method: 'blocks', seedHex: SEED, arms, blockSizes: [4] },
			factors: [{ name: 'hand', values: ['left', 'right'] }],
			people: Array.from({ length: 16 }, (_, i) => ({ hand: i % 2 === 0 ? 'left' : 'right' }))
		};
		const { entries } = run('allocate', input);
		expect(run('allocate', input).entries).toEqual(entries);
		for (const stratum of new Set(entries.map((e: { stratum: string }) => e.stratum))) {
			const own = entries.filter((e: { stratum: string }) => e.stratum === stratum);
			expect(own.filter((e: { armId: string }) => e.armId === 'A')).toHaveLength(4);
		}
	});

	it('draws by minimisation and by a biased coin', () => {
		const got = run('allocate', {
			...{ method: 'minimisation', seedHex: SEED, armCount: 2, weights: { sex: 1 }, certainty: 1 },
			...{ previous: [{ traits: { sex: 'F' }, arm: 0 }], newcomer: { sex: 'F' } }
		});
		expect(got).toMatchObject({ arm: 1, scores: [2, 0], preferred: [1], followed: true });
		const coin = run('allocate', { method: 'biased-coin', seedHex: SEED, counts: [3, 5], p: 1 });
		expect(coin).toEqual({ arm: 0 });
	});

	it('seals and reveals', () => {
		const sealed = run('seal', {});
		expect(run('reveal', sealed)).toEqual({ isRevealed: true });
		expect(run('reveal', { ...sealed, seedHex: SEED })).toEqual({ isRevealed: false });
	});

	it('predicts and orders', () => {
		expect(run('predict-allocation', { places: [2, 2] }).arrangementCount).toBe(6);
		expect(run('predict-allocation', { n: 10 }).expected).toBeCloseTo(1.14708, 5);
		expect(run('orders', { treatmentCount: 3 }).sequences).toHaveLength(6);
	});
});
