import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import {
	computeBetaQuantile,
	computeBetaTails,
	computeBetaUpperQuantile
} from '../../scheduler/statistics/beta-distribution.ts';
import { computeChiSquareUpperQuantile } from '../../scheduler/statistics/chi-square.ts';
import { computeFUpperQuantile } from '../../scheduler/statistics/f-distribution.ts';
import {
	computeGammaQuantile,
	computeGammaTails,
	computeGammaUpperQuantile
} from '../../scheduler/statistics/gamma-distribution.ts';
import type { Tails } from '../../scheduler/statistics/incomplete-gamma.ts';
import {
	computeNoncentralChiSquareQuantile,
	computeNoncentralChiSquareTails
} from '../../scheduler/statistics/noncentral-chi-square.ts';
import {
	computeNoncentralFQuantile,
	computeNoncentralFTails
} from '../../scheduler/statistics/noncentral-f.ts';
import {
	computeNoncentralTCdf,
	computeNoncentralTQuantile
} from '../../scheduler/statistics/noncentral-t.ts';

// Tails by mpmath with 60 digits; see make-noncentral.py beside this file.
type Row = { x: number; lower: number; upper: number };
const { cases } = readJson<{
	cases: {
		gamma: (Row & { shape: number; rate: number })[];
		beta: (Row & { a: number; b: number })[];
		noncentralChiSquare: (Row & { df: number; ncp: number })[];
		noncentralF: (Row & { df1: number; df2: number; ncp: number })[];
	};
}>('noncentral.json');

describe('both tails agree with mpmath to a relative 1e-10, also the small one', () => {
	it.each(cases.gamma)('gamma, shape $shape, at $x', (c) => {
		expectTails(computeGammaTails(c.x, c), c);
	});
	it.each(cases.beta)('beta, $a and $b, at $x', (c) => {
		expectTails(computeBetaTails(c.x, c), c);
	});
	it.each(cases.noncentralChiSquare)('noncentral chi-square, $df, $ncp, at $x', (c) => {
		expectTails(computeNoncentralChiSquareTails(c.x, c), c);
	});
	it.each(cases.noncentralF)('noncentral F, $df1, $df2, $ncp, at $x', (c) => {
		expectTails(computeNoncentralFTails(c.x, c), c);
	});
});

describe('quantiles bring back the point whose smaller tail was given', () => {
	it.each(cases.gamma)('gamma, shape $shape, at $x', (c) => {
		expectRelative(
			c.lower < 0.5 ? computeGammaQuantile(c.lower, c) : computeGammaUpperQuantile(c.upper, c),
			c.x
		);
	});
	it.each(cases.beta)('beta, $a and $b, at $x', (c) => {
		expectRelative(
			c.lower < 0.5 ? computeBetaQuantile(c.lower, c) : computeBetaUpperQuantile(c.upper, c),
			c.x
		);
	});
	it.each(cases.noncentralChiSquare.filter(isInside))('noncentral chi-square at $x', (c) => {
		expectRelative(computeNoncentralChiSquareQuantile(c.lower, c), c.x, 1e-9);
	});
	it.each(cases.noncentralF.filter(isInside))('noncentral F at $x', (c) => {
		expectRelative(computeNoncentralFQuantile(c.lower, c), c.x, 1e-9);
	});
	it.each([
		[1, 0.5, 0.3],
		[10, -3, 0.999],
		[58, 3.0984, 0.2],
		[2.5, 0.01, 0.0001]
	])('noncentral t, %d df, %d, at probability %d', (df, ncp, p) => {
		const x = computeNoncentralTQuantile(p, { df, ncp });
		expectRelative(computeNoncentralTCdf(x, { df, ncp }), p, 1e-9);
	});
	it('upper quantiles far out: closed forms', () => {
		// Two df: the upper tail is exp(-x / 2); F with 2 and 2 df: 1 / (1 + x).
		expectRelative(computeChiSquareUpperQuantile(1e-30, 2), 60 * Math.log(10));
		expectRelative(computeFUpperQuantile(1e-12, 2, 2), 1e12 - 1);
	});
});

describe('SciPy 1.10.1 and R 4.2.2', () => {
	it('scipy.stats.ncf.cdf([3, 2.5, 1.8, 5], [2, 3, 1.7, 4], [30, 57, 33.1, 20], [4, 9.5, 2.2, .5])', () => {
		const rows = [
			[3, 2, 30, 4, 0.5721775764798314],
			[2.5, 3, 57, 9.5, 0.24702341611595596],
			[1.8, 1.7, 33.1, 2.2, 0.5048663289898528],
			[5, 4, 20, 0.5, 0.9903557708796414]
		] as const;
		for (const [x, df1, df2, ncp, lower] of rows)
			expect(Math.abs(computeNoncentralFTails(x, { df1, df2, ncp }).lower - lower)).toBeLessThan(
				1e-8
			);
	});
});

function expectTails(got: Tails, wanted: Row): void {
	// Next to 1 a tail is 1 less the other one, with the digits that leaves.
	expect(got.lower).toBeCloseTo(wanted.lower, 12);
	expect(got.upper).toBeCloseTo(wanted.upper, 12);
	if (wanted.lower < 0.5) expectRelative(got.lower, wanted.lower);
	else expectRelative(got.upper, wanted.upper);
}

function isInside({ lower }: Row): boolean {
	return lower > 1e-12 && lower < 0.9999;
}

function expectRelative(got: number, wanted: number, relative = 1e-10): void {
	expect(Math.abs(got / wanted - 1), `got ${got}, expected ${wanted}`).toBeLessThanOrEqual(
		relative
	);
}

function readJson<Content>(name: string): Content {
	return JSON.parse(readFileSync(new URL(`data/${name}`, import.meta.url), 'utf8'));
}
