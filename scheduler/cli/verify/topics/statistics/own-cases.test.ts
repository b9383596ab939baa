import { describe, expect, it } from 'vitest';
import { caseFileSchema, verifyCases } from '../../verify-cases.ts';

const slope = { n_per_group: 20, sigma_b: 0.4, sigma: 1, alpha: 0.05 };
const mixed = { k: 2, m: 4, N: 40, rho: 0.5, epsilon: 1, alpha: 0.05 };
const shares = { n_per_group: 50, p1: 0.5, p2: 0.75, alpha: 0.05, sides: 2 };

/** Values by SciPy 1.17.1: t, nct, chi2, f, ncf and norm, as in tests/reference. */
const CASES = [
	[
		'power',
		{ ...slope, delta_slope: 0.3, days: [0, 1, 2, 3, 4, 5] },
		{ power: 0.5097439254264463 }
	],
	['power', { ...slope, delta: 0.3, S_xx: 17.5 }, { power: 0.5097439254264463 }],
	[
		'power',
		{
			rows: [
				{ ...mixed, effect: 'between', f: 0.25 },
				{ ...mixed, effect: 'interaction', f: 0.15 }
			]
		},
		{ power: [0.4958125274019459, 0.5867051382136588], df2: [38, 114] }
	],
	['power', { n_per_group: 30, d: 0.5, rho: 0.6, alpha: 0.05 }, { power: 0.6626580468618867 }],
	['power', shares, { power: 0.744742886391247 }],
	['quantiles', { p: [0.95, 0.975], df: [20, 20] }, { q: [1.7247182429207866, 2.085963447265864] }],
	['quantiles', { p: 0.95, df: 2 }, { q: 5.991464547107979 }],
	['multiplicity', { p: [0.01, 0.04] }, { holm: [0.02, 0.04], bonferroni: [0.02, 0.08] }],
	['randomisation', { treatments: 4 }, { sequences: 4, each_pair_follows: 1, property: 'any' }]
] as const;

describe('cases that somebody brings', () => {
	it.each(CASES)('%s with %j', (topic, inputs, expected) => {
		const example = { id: 'own', topic, inputs, expected, tolerance: { abs: 1e-8 } };
		const { verdicts } = verifyCases(caseFileSchema.parse({ cases: [example] }));
		expect(verdicts).toMatchObject([{ verdict: 'pass' }]);
	});

	it('fail with another value, and are unsupported with other names', () => {
		const file = (inputs: object, power: number) => ({
			cases: [{ id: 'own', topic: 'power', inputs, expected: { power } }]
		});
		const judge = (inputs: object, power: number) =>
			verifyCases(caseFileSchema.parse(file(inputs, power))).verdicts[0]?.verdict;
		expect(judge(shares, 0.75)).toBe('fail');
		expect(judge({ ...shares, colour: 'red' }, 0.75)).toBe('unsupported');
	});
});
