import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { analyseCovariance } from './ancova.ts';
import { testEquivalence } from './equivalence.ts';
import { fitLeastSquares } from './least-squares.ts';
import { analyseMixed } from './mixed-anova.ts';
import { analyseOneWay } from './one-way-anova.ts';
import { testOneSample, testPaired, testTwoSample, testWelch } from './t-tests.ts';
import { compareProportions } from './two-proportions.ts';

const value = fc.double({ min: -100, max: 100, noNaN: true });
const list = fc.array(value, { minLength: 3, maxLength: 12 });

/** Every number at any depth. */
function listNumbers(thing: unknown): number[] {
	if (typeof thing === 'number') return [thing];
	if (typeof thing !== 'object' || thing === null) return [];
	return Object.values(thing).flatMap(listNumbers);
}

describe('tests of any values', () => {
	it('give a p in 0 to 1 and no NaN, or say why not', () => {
		const property = fc.property(list, list, list, (a, b, c) => {
			const n = Math.min(a.length, b.length);
			const results = [
				testOneSample(a),
				testPaired(a.slice(0, n), b.slice(0, n)),
				testTwoSample(a, b),
				testWelch(a, b),
				analyseOneWay([a, b, c]),
				testEquivalence(a, b, { design: 'welch', lowerMargin: -1, upperMargin: 1, alpha: 0.05 })
			];
			for (const result of results) {
				if (result.ok) expect(listNumbers(result).every((x) => !Number.isNaN(x))).toBe(true);
				else expect(['too-few-values', 'no-variance']).toContain(result.reason);
			}
		});
		fc.assert(property, { seed: 141, numRuns: 200 });
	});

	it('do not depend on unit or origin', () => {
		const property = fc.property(
			list,
			list,
			fc.double({ min: 0.01, max: 50, noNaN: true }),
			(a, b, s) => {
				const turn = (values: number[]) => values.map((x) => s * x + 7);
				const [plain, turned] = [testWelch(a, b), testWelch(turn(a), turn(b))];
				if (!plain.ok || !turned.ok || plain.standardError < 1e-3) return;
				expect(Math.abs(turned.t - plain.t)).toBeLessThan(1e-6 * (1 + Math.abs(plain.t)));
			}
		);
		fc.assert(property, { seed: 142, numRuns: 150 });
	});

	it('of two groups are the same by t and by F', () => {
		const property = fc.property(list, list, (a, b) => {
			const [t, f] = [testTwoSample(a, b), analyseOneWay([a, b])];
			if (!t.ok || !f.ok || t.standardError < 1e-3) return;
			expect(f.test.f).toBeCloseTo(t.t * t.t, 6);
			expect(f.test.p).toBeCloseTo(t.p, 6);
			const adjusted = analyseCovariance({
				...{ y: [...a, ...b], group: [...a.map(() => 0), ...b.map(() => 1)], covariates: [] }
			});
			if (!adjusted.ok) throw new Error(adjusted.reason);
			expect(adjusted.groups.p).toBeCloseTo(t.p, 6);
			expect(adjusted.slopesDiffer).toBeNull();
		});
		fc.assert(property, { seed: 143, numRuns: 100 });
	});

	it('of two measurements within are the paired test squared', () => {
		const property = fc.property(list, list, (a, b) => {
			const n = Math.min(a.length, b.length);
			const people = a.slice(0, n).map((x, i) => ({ group: 0, values: [x, b[i] ?? 0] }));
			const [got, paired] = [analyseMixed(people), testPaired(a.slice(0, n), b.slice(0, n))];
			if (!got.ok || !paired.ok || paired.standardError < 1e-3) return;
			expect(got.within.f).toBeCloseTo(paired.t ** 2, 6);
			expect(got.epsilon.greenhouseGeisser).toBeCloseTo(1, 12);
			expect([got.between, got.interaction]).toEqual([null, null]);
		});
		fc.assert(property, { seed: 144, numRuns: 100 });
	});
});

describe('least squares', () => {
	it('leaves residuals that no column explains', () => {
		const property = fc.property(
			fc.array(fc.tuple(value, value, value), { minLength: 5 }),
			(rows) => {
				const y = rows.map(([first]) => first);
				const columns = [rows.map(() => 1), rows.map((r) => r[1]), rows.map((r) => r[2])];
				const got = fitLeastSquares(y, columns);
				if (!got.ok) return;
				for (const column of columns) {
					const product = column.reduce((sum, x, i) => sum + x * (got.residuals[i] ?? 0), 0);
					expect(Math.abs(product)).toBeLessThan(1e-8);
				}
			}
		);
		fc.assert(property, { seed: 145, numRuns: 100 });
	});

	it('names what cannot be fitted', () => {
		expect(
			fitLeastSquares(
				[1, 2],
				[
					[1, 1],
					[1, 2]
				]
			)
		).toEqual({ ok: false, reason: 'too-few-rows' });
		const twice = [
			[1, 2, 3],
			[2, 4, 6]
		];
		expect(fitLeastSquares([1, 2, 3], twice)).toEqual({ ok: false, reason: 'collinear' });
	});
});

describe('two shares', () => {
	it('have intervals that hold the difference, and an odds ratio also with an empty cell', () => {
		const count = fc.integer({ min: 1, max: 60 });
		const property = fc.property(count, count, fc.nat(60), fc.nat(60), (n1, n2, x1, x2) => {
			const successes: [number, number] = [Math.min(n1, x1), Math.min(n2, x2)];
			const got = compareProportions({ successes, trials: [n1, n2] });
			expect(listNumbers(got).every(Number.isFinite)).toBe(true);
			expect(got.differenceInterval.lower).toBeLessThanOrEqual(got.difference + 1e-12);
			expect(got.differenceInterval.upper).toBeGreaterThanOrEqual(got.difference - 1e-12);
			expect(got.oddsRatioInterval.lower).toBeLessThan(got.oddsRatio);
			expect(got.fisherP).toBeGreaterThan(0);
		});
		fc.assert(property, { seed: 146, numRuns: 200 });
	});
});

describe('what cannot be is refused', () => {
	it.each([
		['pairs of unequal count', () => testPaired([1, 2], [1])],
		['what is no number', () => testOneSample([1, Number.NaN])],
		['one group', () => analyseOneWay([[1, 2]])],
		[
			'groups with a gap',
			() => analyseCovariance({ y: [1, 2, 3], group: [0, 2, 2], covariates: [] })
		],
		[
			'people of unequal length',
			() =>
				analyseMixed([
					{ group: 0, values: [1, 2] },
					{ group: 0, values: [1] }
				])
		],
		[
			'margins the wrong way',
			() =>
				testEquivalence([1, 2], [2, 3], {
					design: 'pooled',
					lowerMargin: 1,
					upperMargin: -1,
					alpha: 0.05
				})
		],
		['more successes than trials', () => compareProportions({ successes: [3, 1], trials: [2, 2] })]
	])('%s', (_, call) => {
		expect(call).toThrow(RangeError);
	});
});
