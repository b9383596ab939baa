import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { computePowerCurve } from '$scheduler/power/power-curve.ts';
import { findRequiredN } from '$scheduler/power/required-n.ts';
import { computePowerWithLosses, computeTwoSampleTPower } from '$scheduler/power/two-sample-t.ts';

// Values printed by R 4.2.2 (power.t.test) and pwr 1.3-0, the source named in each case.
const path = new URL('data/r-distributions-and-power.json', import.meta.url);
const { cases: fromR }: { cases: RCases } = JSON.parse(readFileSync(path, 'utf8'));
// SciPy 1.17 nct.cdf and nct.sf, unequal groups, both rejection regions: make-two-sample-power.py.
const scipyPath = new URL('data/two-sample-t-power.json', import.meta.url);
const fromScipy: { cases: ScipyCase[] } = JSON.parse(readFileSync(scipyPath, 'utf8'));

const TEST = { alpha: 0.05, sides: 2 } as const;

describe('power of the two-sample t test', () => {
	it('equals R power.t.test(strict = TRUE)', () => {
		const { inputs, expected } = fromR['power-t-two-sample-strict'];
		inputs.d.forEach((effectSize: number, i: number) => {
			const [n1, n2] = [inputs.n_per_group, inputs.n_per_group];
			const power = computeTwoSampleTPower({ ...TEST, effectSize, n1, n2 });
			// R prints 15 digits; its pt is good to about 1e-12.
			expect(Math.abs(power - (expected.power[i] ?? NaN))).toBeLessThan(1e-9);
		});
	});

	it('equals R power.t.test, one-sided', () => {
		const { inputs, expected } = fromR['power-t-one-sided'];
		const [n1, n2] = [inputs.n_per_group, inputs.n_per_group];
		const design = { alpha: inputs.alpha, sides: 1, effectSize: inputs.delta, n1, n2 } as const;
		expect(Math.abs(computeTwoSampleTPower(design) - expected.power)).toBeLessThan(1e-9);
	});

	it.each(fromScipy.cases)(
		'equals SciPy at d $d, n $n1 and $n2, alpha $alpha, $sides-sided',
		(c) => {
			const { d: effectSize, power, ...design } = c;
			expect(Math.abs(computeTwoSampleTPower({ effectSize, ...design }) - power)).toBeLessThan(
				1e-10
			);
		}
	);

	// Planning table: two-sided .05, n per group, three decimals by R power.t.test.
	it.each([
		[0.5, 6, 0.12],
		[0.5, 11, 0.2],
		[0.5, 16, 0.28],
		[0.5, 20, 0.34],
		[0.5, 30, 0.48],
		[0.8, 8, 0.32],
		[0.8, 30, 0.861]
	])('d %d with %d a group has power %d', (effectSize, n, power) => {
		const computed = computeTwoSampleTPower({ ...TEST, effectSize, n1: n, n2: n });
		const digits = String(power).length - 2;
		expect(computed.toFixed(digits)).toBe(power.toFixed(digits));
	});

	it('what losses cost 30 a group at d 0.8: .822, .736, .689', () => {
		const design = { ...TEST, effectSize: 0.8, n1: 30, n2: 30 };
		const after = (peopleLossShare: number, effectLossShare: number) =>
			computePowerWithLosses(design, { peopleLossShare, effectLossShare }).toFixed(3);
		expect([after(0.1, 0), after(0, 0.15), after(0.1, 0.15)]).toEqual(['0.822', '0.736', '0.689']);
	});

	it('the table under the curve', () => {
		const losses = { peopleLossShare: 0.1, effectLossShare: 0.15 };
		const ns = [8, 14, 20, 26, 30, 34, 38, 40, 44, 50];
		const curve = computePowerCurve({ ...TEST, effectSize: 0.8, losses, ns });
		const planned = [0.32, 0.53, 0.69, 0.81, 0.86, 0.9, 0.93, 0.94, 0.96, 0.98];
		expect(curve.map(({ power }) => Number(power.toFixed(2)))).toEqual(planned);
		const both = [0.22, 0.37, 0.51, 0.62, 0.69, 0.74, 0.79, 0.81, 0.85, 0.89];
		expect(curve.map(({ powerWithLosses }) => Number(powerWithLosses?.toFixed(2)))).toEqual(both);
	});
});

describe('people needed', () => {
	it('equals pwr.t.test before rounding', () => {
		const { inputs, expected } = fromR['n-pwr-t-cohen'];
		inputs.d.forEach((effectSize: number, i: number) => {
			const found = findRequiredN({ ...TEST, effectSize, power: inputs.power });
			const n = found.ok ? found.exactN1 : 0;
			expect(Math.abs(n / (expected.n_per_group[i] ?? NaN) - 1)).toBeLessThan(1e-5);
		});
	});

	// Planning table: n per group for 80 and 90 %.
	it.each([
		[0.8, 26, 34],
		[0.5, 64, 86],
		[0.3, 176, 235]
	])('d %d needs %d a group for .80 and %d for .90', (effectSize, for80, for90) => {
		const needed = (power: number) => findRequiredN({ ...TEST, effectSize, power });
		expect(needed(0.8)).toMatchObject({ ok: true, n1: for80, n2: for80 });
		expect(needed(0.9)).toMatchObject({ ok: true, n1: for90, n2: for90 });
	});

	it('with both losses d 0.8 needs 39 a group for .80', () => {
		const losses = { peopleLossShare: 0.1, effectLossShare: 0.15 };
		const found = findRequiredN({ ...TEST, effectSize: 0.8, power: 0.8, losses });
		expect(found).toMatchObject({ ok: true, n1: 39 });
	});
});

type RCases = {
	'power-t-two-sample-strict': {
		inputs: { n_per_group: number; d: number[] };
		expected: { power: number[] };
	};
	'power-t-one-sided': {
		inputs: { n_per_group: number; delta: number; alpha: number };
		expected: { power: number };
	};
	'n-pwr-t-cohen': {
		inputs: { d: number[]; power: number };
		expected: { n_per_group: number[] };
	};
};

type ScipyCase = {
	d: number;
	n1: number;
	n2: number;
	alpha: number;
	sides: 1 | 2;
	power: number;
};
