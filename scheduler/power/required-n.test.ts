import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computePeopleToEnrol, findRequiredN } from './required-n.ts';
import { computePowerCurve } from './power-curve.ts';
import { computePowerWithLosses, computeTwoSampleTPower } from './two-sample-t.ts';

const TEST = { alpha: 0.05, sides: 2 } as const;

describe('people to enrol', () => {
	it('40 who complete at 80 % completion are 50 to enrol', () => {
		expect(computePeopleToEnrol(40, 0.2)).toBe(50);
		expect(computePeopleToEnrol(27, 0.1)).toBe(30);
		expect(computePeopleToEnrol(0, 0.5)).toBe(0);
		expect(computePeopleToEnrol(41, 0.2)).toBe(52);
	});

	it.each([-0.1, 1, 1.2, NaN])('a loss of %d is refused', (share) => {
		expect(() => computePeopleToEnrol(40, share)).toThrow(RangeError);
	});
});

describe('the smallest groups', () => {
	it('reach the power, and one person fewer does not', () => {
		const property = fc.property(
			fc.double({ min: 0.2, max: 2, noNaN: true }),
			fc.double({ min: 0.3, max: 0.97, noNaN: true }),
			fc.constantFrom(0.5, 1, 2),
			fc.constantFrom(0, 0.15),
			(effectSize, power, ratio, peopleLossShare) => {
				const losses = { peopleLossShare, effectLossShare: 0.1 };
				const found = findRequiredN({ ...TEST, effectSize, power, ratio, losses });
				if (!found.ok) throw new Error(found.reason);
				expect(found.power).toBeGreaterThanOrEqual(power - 1e-9);
				const fewer = { ...TEST, effectSize, n1: found.n1 - 1, n2: (found.n1 - 1) * ratio };
				if (Math.min(fewer.n1, fewer.n2) * (1 - peopleLossShare) < 2) return;
				expect(computePowerWithLosses(fewer, losses)).toBeLessThan(power);
			}
		);
		fc.assert(property, { seed: 41, numRuns: 60 });
	});

	it('do not exist without an effect, or below the largest group allowed', () => {
		const search = { ...TEST, power: 0.8 };
		expect(findRequiredN({ ...search, effectSize: 0 })).toEqual({ ok: false, reason: 'no-effect' });
		const wrongWay = { ...search, sides: 1, effectSize: -0.5 } as const;
		expect(findRequiredN(wrongWay)).toEqual({ ok: false, reason: 'no-effect' });
		const small = { ...search, effectSize: 0.1, largestN: 100 };
		expect(findRequiredN(small)).toEqual({ ok: false, reason: 'beyond-limit' });
	});

	it('a huge effect needs the two people a t test needs', () => {
		expect(findRequiredN({ ...TEST, effectSize: 40, power: 0.8 })).toMatchObject({ n1: 2, n2: 2 });
	});

	it.each([0.05, 1, 0, NaN])('a wanted power of %d is refused', (power) => {
		expect(() => findRequiredN({ ...TEST, effectSize: 0.5, power })).toThrow(RangeError);
	});
});

describe('power', () => {
	it('without an effect is alpha', () => {
		for (const alpha of [0.001, 0.05, 0.2]) {
			const power = computeTwoSampleTPower({ effectSize: 0, n1: 9, n2: 14, alpha, sides: 2 });
			expect(power).toBeCloseTo(alpha, 12);
		}
	});

	it('does not depend on the sign of the effect or on which group is larger', () => {
		const design = { ...TEST, effectSize: 0.6, n1: 11, n2: 19 };
		const power = computeTwoSampleTPower(design);
		expect(computeTwoSampleTPower({ ...design, effectSize: -0.6 })).toBeCloseTo(power, 12);
		expect(computeTwoSampleTPower({ ...design, n1: 19, n2: 11 })).toBeCloseTo(power, 12);
	});

	it('of a whole population is 1, not an error', () => {
		expect(computeTwoSampleTPower({ ...TEST, effectSize: 50, n1: 1e6, n2: 1e6 })).toBe(1);
	});

	it.each([
		[{ n1: 1 }],
		[{ n2: Infinity }],
		[{ effectSize: NaN }],
		[{ alpha: 0 }],
		[{ alpha: 1.5 }]
	])('refuses %j', (part) => {
		const design = { ...TEST, effectSize: 0.5, n1: 10, n2: 10, ...part };
		expect(() => computeTwoSampleTPower(design)).toThrow(RangeError);
	});

	it('is no number, and said so, where losses leave fewer than two people', () => {
		const losses = { peopleLossShare: 0.5, effectLossShare: 0 };
		const [first, second] = computePowerCurve({ ...TEST, effectSize: 1, losses, ns: [3, 4] });
		expect(first?.powerWithLosses).toBeNull();
		expect(second?.powerWithLosses).toBeGreaterThan(0);
	});
});
