import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeCovariance } from './moments.ts';
import { decomposeImprovement } from './decompose-improvement.ts';
import { solveAssignment } from './linear-assignment.ts';
import {
	computeCovariationFreeCost,
	computeCovariationIndex,
	computeMeanCost
} from './mean-cost.ts';
import { pairBetter } from './pair-better.ts';
import { anyTrials, tiltedTrials } from '../../tests/support/variability/any-trials.ts';
import { computeVariabilityCosts } from './variability-costs.ts';

const sum = (x: readonly number[]) => x.reduce((total, value) => total + value, 0);
const squared = (x: readonly number[]) => sum(x) ** 2;
const absolute = (x: readonly number[]) => Math.abs(sum(x) - 1);

describe('decomposeImprovement', () => {
	it('its parts add up to the improvement in both orders, for any cost', () => {
		fc.assert(
			fc.property(anyTrials(2), anyTrials(2), (before, after) => {
				const parts = decomposeImprovement(before, after, absolute);
				if (!parts.ok) throw new Error(parts.reason);
				for (const { tolerance, noise } of [parts.shiftFirst, parts.spreadFirst, parts.shapley])
					expect(tolerance + noise + parts.covariation).toBeCloseTo(parts.total, 9);
				expect(parts.range).toBeGreaterThanOrEqual(0);
			})
		);
	});

	it('of a linear task with squared error is known in closed form', () => {
		fc.assert(
			fc.property(anyTrials(2), anyTrials(2), (before, after) => {
				const parts = decomposeImprovement(before, after, squared);
				if (!parts.ok) throw new Error(parts.reason);
				const describe = (trials: number[][]) => {
					const n = trials.length;
					const S = computeCovariance(trials).map((row) => row.map((x) => (x * (n - 1)) / n));
					const bias = trials.reduce((total, trial) => total + sum(trial), 0) / n;
					return {
						place: bias ** 2,
						trace: (S[0]?.[0] ?? 0) + (S[1]?.[1] ?? 0),
						both: S[0]?.[1] ?? 0
					};
				};
				const [one, two] = [describe(before), describe(after)];
				expect(parts.shiftFirst.tolerance).toBeCloseTo(one.place - two.place, 8);
				expect(parts.shiftFirst.noise).toBeCloseTo(one.trace - two.trace, 8);
				expect(parts.covariation).toBeCloseTo(2 * (one.both - two.both), 8);
				expect(parts.range).toBeLessThan(1e-8);
			})
		);
	});

	it('says so where a cost is not defined', () => {
		const trials = tiltedTrials(8);
		const cost = ([x = 0]: readonly number[]) => Math.sqrt(x - 3);
		expect(decomposeImprovement(trials, trials, cost)).toEqual({
			ok: false,
			reason: 'undefined-cost'
		});
	});
});

describe('means without covariation', () => {
	it('drawn permutations agree with all combinations within four standard errors', () => {
		const trials = tiltedTrials(25);
		const exact = computeCovariationFreeCost(trials, absolute);
		const drawn = computeCovariationFreeCost(trials, absolute, { combinationMax: 10, seed: 3 });
		if (!exact.ok || !drawn.ok) throw new Error('no mean');
		expect(drawn.standardError).toBeGreaterThan(0);
		expect(Math.abs(drawn.mean - exact.mean)).toBeLessThan(4 * drawn.standardError);
	});

	it('the index is 1 for full compensation and 0 for a single variable', () => {
		const line = tiltedTrials(12).map(([x = 0]) => [x, -x]);
		const index = computeCovariationIndex(line, sum);
		expect(index.ok && index.index).toBeCloseTo(1, 12);
		const single = computeCovariationIndex(line, ([x = 0]) => x);
		expect(single.ok && single.index).toBeCloseTo(0, 12);
		const none = computeCovariationIndex(line, () => 2);
		expect(none).toEqual({ ok: false, reason: 'no-spread' });
	});
});

describe('solveAssignment', () => {
	it('is as cheap as the cheapest of all orders', () => {
		const costs = fc.array(
			fc.array(fc.integer({ min: -50, max: 50 }), { minLength: 5, maxLength: 5 }),
			{ minLength: 5, maxLength: 5 }
		);
		fc.assert(
			fc.property(costs, (C) => {
				const { columnOf, total } = solveAssignment(C);
				expect([...columnOf].sort()).toEqual([0, 1, 2, 3, 4]);
				const least = Math.min(
					...listOrders([0, 1, 2, 3, 4]).map((order) =>
						order.reduce((t, j, i) => t + (C[i]?.[j] ?? 0), 0)
					)
				);
				expect(total).toBe(least);
			})
		);
	});

	it('refuses what is not square or not finite', () => {
		expect(() => solveAssignment([[1, 2]])).toThrow(RangeError);
		expect(() => solveAssignment([[Number.NaN]])).toThrow(RangeError);
		expect(solveAssignment([])).toEqual({ columnOf: [], total: 0 });
	});
});

function listOrders(items: number[]): number[][] {
	if (items.length <= 1) return [items];
	return items.flatMap((item) =>
		listOrders(items.filter((other) => other !== item)).map((rest) => [item, ...rest])
	);
}

describe('pairBetter', () => {
	it('keeps the values of each variable and never makes the cost larger', () => {
		fc.assert(
			fc.property(
				anyTrials(2, { least: 3, most: 9 }),
				anyTrials(3, { least: 3, most: 7 }),
				(two, three) => {
					for (const trials of [two, three]) {
						const found = pairBetter(trials, absolute);
						const made = computeMeanCost(trials, absolute);
						if (!found.ok || !made.ok) throw new Error('no pairing');
						expect(found.mean).toBeLessThanOrEqual(made.mean + 1e-12);
						expect(found.isExact).toBe(trials === two);
						trials[0]?.forEach((_, axis) => {
							const values = (list: readonly (readonly number[])[]) =>
								list.map((trial) => trial[axis] ?? NaN).sort((a, b) => a - b);
							expect(values(found.executions)).toEqual(values(trials));
						});
					}
				}
			),
			{ numRuns: 40 }
		);
	});

	it('pairs sums towards a target by opposite order', () => {
		const found = pairBetter(
			[
				[1, 1],
				[2, 2],
				[3, 3]
			],
			([x = 0, y = 0]) => Math.abs(x + y - 4)
		);
		expect(found.ok && found.mean).toBe(0);
		const three = pairBetter(
			[
				[1, 1, 0],
				[2, 2, 0],
				[3, 3, 0]
			],
			(x) => Math.abs(sum(x) - 4)
		);
		expect(three.ok && three.mean).toBe(0);
	});
});

describe('computeVariabilityCosts', () => {
	const ranges = [
		{ min: -10, max: 10 },
		{ min: -10, max: 10 }
	];

	it('are 0 or more, and a block far away pays for its place alone', () => {
		const near = tiltedTrials(20).map(([x = 0, y = 0]) => [0.1 * x, 0.1 * y]);
		const far = near.map(([x = 0, y = 0]) => [x + 4, y]);
		const costs = computeVariabilityCosts(far, absolute, { ranges });
		if (!costs.ok) throw new Error(costs.reason);
		expect(costs.tolerance).toBeGreaterThan(2);
		expect(costs.noise).toBeLessThan(0.2);
		expect(costs.covariation).toBeLessThan(0.05);
		expect(costs.isPairingExact).toBe(true);
	});

	it('a shift keeps every trial within its range', () => {
		const trials = [
			[0, 0],
			[1, 1]
		];
		const costs = computeVariabilityCosts(trials, (x) => Math.abs(sum(x) - 100), {
			ranges: [
				{ min: 0, max: 3 },
				{ min: 0, max: 2 }
			]
		});
		expect(costs.ok && costs.bestShift).toEqual([2, 1]);
	});

	it('with no spread and at the best place nothing can be gained', () => {
		const costs = computeVariabilityCosts(
			[
				[0.5, 0.5],
				[0.5, 0.5]
			],
			absolute,
			{ ranges }
		);
		expect(costs.ok && [costs.tolerance, costs.noise, costs.covariation]).toEqual([0, 0, 0]);
	});
});
