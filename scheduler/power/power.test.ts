import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeAnovaPower, computeMixedAnovaPower } from './anova-power.ts';
import { reestimateBlinded } from './blinded-reestimation.ts';
import { computeEquivalencePower } from './equivalence-power.ts';
import { computeBoundaries } from './group-sequential.ts';
import { computeProportionPower } from './proportion-power.ts';
import { countReplicates } from './sample-counts.ts';
import { findSmallestN } from './smallest-n.ts';
import { computeSpent } from './spending.ts';
import { computeDifferenceSd, computeOneSampleTPower, computeSlopePower } from './t-power.ts';
import { computeTwoSampleTPower } from './two-sample-t.ts';
import { computeWelchPower } from './welch-power.ts';

const TEST = { alpha: 0.05, sides: 2 } as const;
const effect = fc.double({ min: 0, max: 2, noNaN: true });
const people = fc.integer({ min: 3, max: 80 });

describe('power', () => {
	it('rises with the effect and stays between alpha and 1', () => {
		const property = fc.property(effect, people, people, (d, n1, n2) => {
			const welch = (difference: number) =>
				computeWelchPower({ ...TEST, difference, sd1: 1, sd2: 2, n1, n2 });
			expect(welch(d + 0.3)).toBeGreaterThan(welch(d) - 1e-12);
			const paired = computeOneSampleTPower({ ...TEST, effectSize: d, n: n1 });
			expect(paired).toBeGreaterThanOrEqual(0.05 - 1e-12);
			expect(paired).toBeLessThanOrEqual(1);
		});
		fc.assert(property, { seed: 101, numRuns: 60 });
	});

	it('of Welch’s test nears that of equal variances in large equal groups', () => {
		const same = { ...TEST, n1: 400, n2: 400 };
		const welch = computeWelchPower({ ...same, difference: 0.2, sd1: 1, sd2: 1 });
		expect(welch).toBeCloseTo(computeTwoSampleTPower({ ...same, effectSize: 0.2 }), 4);
	});

	it('of two groups is the same by t and by F', () => {
		const byF = computeAnovaPower({ groupCount: 2, totalN: 40, f: 0.25, alpha: 0.05 });
		const byT = computeTwoSampleTPower({ ...TEST, effectSize: 0.5, n1: 20, n2: 20 });
		expect(byF).toBeCloseTo(byT, 10);
	});

	it('of equivalence falls with the true difference and is at most alpha at the margin', () => {
		const design = { lowerMargin: -0.5, upperMargin: 0.5, sd: 1, alpha: 0.05 } as const;
		const at = (trueDifference: number) =>
			computeEquivalencePower({ ...design, trueDifference, paired: false, n1: 60, n2: 80 });
		expect(at(0)).toBeGreaterThan(at(0.2));
		expect(at(0.5)).toBeLessThanOrEqual(0.05);
		expect(at(0.5)).toBeGreaterThan(0.04);
	});

	it('spending reaches alpha at full information and never falls', () => {
		const share = fc.double({ min: 0.01, max: 1, noNaN: true });
		const kinds = [{ kind: 'obrien-fleming' }, { kind: 'pocock' }, { kind: 'power', exponent: 2 }];
		const property = fc.property(share, share, (a, b) => {
			for (const spending of kinds as Parameters<typeof computeSpent>[0][]) {
				const at = (information: number) => computeSpent(spending, { alpha: 0.025, information });
				expect(at(Math.max(a, b))).toBeGreaterThanOrEqual(at(Math.min(a, b)));
				expect(at(1)).toBeCloseTo(0.025, 14);
			}
		});
		fc.assert(property, { seed: 102, numRuns: 100 });
	});

	it('a look too early to spend anything has no boundary', () => {
		const spending = { kind: 'obrien-fleming' } as const;
		const [first, last] = computeBoundaries({
			...{ spending, alphaPerSide: 0.025, information: [0.001, 1], sides: 2 }
		});
		expect(first).toMatchObject({ z: Infinity, spentHere: 0 });
		expect(last?.z).toBeCloseTo(1.959963984540054, 8);
	});

	it('the deviation of paired differences is 0 at correlation 1', () => {
		expect(computeDifferenceSd({ sd1: 2, sd2: 2, correlation: 1 })).toBe(0);
		expect(computeDifferenceSd({ sd1: 3, sd2: 4, correlation: 0 })).toBe(5);
	});

	it('re-estimation says what is missing, and never goes below the plan', () => {
		const plan = { difference: 1, alpha: 0.05, power: 0.8, plannedPerGroup: 50 };
		expect(reestimateBlinded({ ...plan, pooledValues: [1, 2] })).toEqual({
			ok: false,
			reason: 'too-few-values'
		});
		expect(reestimateBlinded({ ...plan, pooledValues: [2, 2, 2] })).toEqual({
			ok: false,
			reason: 'no-variance'
		});
		expect(reestimateBlinded({ ...plan, pooledValues: [1, 2, 3, 2] })).toMatchObject({
			ok: true,
			perGroup: 50
		});
	});

	it('a search that cannot end says why', () => {
		const none = { computePower: () => 0.05, power: 0.8, smallest: 2 };
		expect(findSmallestN(none)).toEqual({ ok: false, reason: 'no-effect' });
		const slow = { computePower: (n: number) => n / 1e9, power: 0.8, smallest: 2 };
		expect(findSmallestN(slow)).toEqual({ ok: false, reason: 'beyond-limit' });
	});
});

describe('what cannot be is refused', () => {
	const mixed = { groupCount: 2, measurementCount: 3, totalN: 20, f: 0.2, alpha: 0.05 };
	it.each([
		['one person', () => computeOneSampleTPower({ ...TEST, effectSize: 1, n: 1 })],
		[
			'equal times',
			() =>
				computeSlopePower({
					...{ ...TEST, slopeDifference: 1, n1: 5, n2: 5, times: [2, 2, 2] },
					...{ slopeSd: 1, residualSd: 1 }
				})
		],
		[
			'a correlation of 1',
			() => computeMixedAnovaPower({ ...mixed, correlation: 1, effect: 'within' })
		],
		[
			'epsilon below its limit',
			() => computeMixedAnovaPower({ ...mixed, correlation: 0, epsilon: 0.2, effect: 'within' })
		],
		[
			'a share of 1',
			() => computeProportionPower({ ...TEST, p1: 0.5, p2: 1, n1: 9, n2: 9, method: 'normal' })
		],
		['no half width', () => countReplicates({ p: 0.5, halfWidth: 0, level: 0.95 })],
		[
			'information that falls',
			() =>
				computeBoundaries({
					...{
						spending: { kind: 'pocock' },
						alphaPerSide: 0.025,
						information: [0.5, 0.4],
						sides: 2
					}
				})
		]
	])('%s', (_, call) => {
		expect(call).toThrow(RangeError);
	});
});
