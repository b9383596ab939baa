import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
	computeCholesky,
	logDeterminantFromCholesky,
	solveWithCholesky
} from '../../linear-algebra/cholesky.ts';
import { dot, entry } from '../../linear-algebra/vector.ts';
import { drawNormal, drawUniform } from '../../random/random-stream.ts';
import { createSeededStream } from '../../random/seeded-stream.ts';
import { computeProfile, type Theta } from './criterion.ts';
import { fitMixedModel, type MixedModelFit } from './fit-mixed-model.ts';
import { evaluateCriterion } from './gradient.ts';
import { computeKenwardRoger } from './kenward-roger.ts';
import { sumModel, type MixedModelData } from './model-sums.ts';
import { createSatterthwaite } from './satterthwaite.ts';

/** People measured on up to seven days, of whom some leave. */
function simulate(seed: number, slopeSd = 0.2) {
	const stream = createSeededStream(seed);
	const rows: { y: number; day: number; arm: number; person: number }[] = [];
	for (let person = 0; person < 16; person += 1) {
		const [level, slope] = [2 * drawNormal(stream), slopeSd * drawNormal(stream)];
		for (let day = 0; day < 7; day += 1) {
			if (day > 1 && drawUniform(stream) < 0.1) break;
			const y = 5 + level + (slope - 0.3) * day + drawNormal(stream);
			rows.push({ y, day, arm: person % 2, person });
		}
	}
	const columnOf = (read: (row: (typeof rows)[number]) => number) => rows.map(read);
	const ones = columnOf(() => 1);
	const day = columnOf((row) => row.day);
	return {
		y: columnOf((row) => row.y),
		fixed: [ones, day, columnOf((row) => row.arm), columnOf((row) => row.arm * row.day)],
		random: [ones, day],
		group: columnOf((row) => row.person)
	};
}

function fit(data: MixedModelData, method: 'REML' | 'ML' = 'REML'): MixedModelFit {
	const result = fitMixedModel(data, method);
	if (!result.ok) throw new Error(result.reason);
	return result;
}

/** The criterion by its definition, with the whole covariance matrix of all rows. */
function computePlainly(
	data: ReturnType<typeof simulate>,
	D: readonly [number, number, number],
	method: 'REML' | 'ML'
) {
	const n = data.y.length;
	const z = (k: 0 | 1, i: number) => entry(data.random[k] ?? [], i);
	const V = data.y.map((_, i) =>
		data.y.map((__, j) => {
			const own = i === j ? 1 : 0;
			if (data.group[i] !== data.group[j]) return own;
			const shared = D[1] * (z(0, i) * z(1, j) + z(1, i) * z(0, j));
			return own + D[0] * z(0, i) * z(0, j) + shared + D[2] * z(1, i) * z(1, j);
		})
	);
	const factor = computeCholesky(V);
	if (!factor.ok) throw new Error(factor.reason);
	const solved = data.fixed.map((x) => solveWithCholesky(factor.lower, x));
	const A = data.fixed.map((x) => solved.map((other) => dot(x, other)));
	const inner = computeCholesky(A);
	if (!inner.ok) throw new Error(inner.reason);
	const b = solveWithCholesky(
		inner.lower,
		solved.map((column) => dot(column, data.y))
	);
	const rest = data.y.map(
		(y, i) => y - data.fixed.reduce((s, x, j) => s + entry(x, i) * entry(b, j), 0)
	);
	const rss = dot(rest, solveWithCholesky(factor.lower, rest));
	const df = method === 'REML' ? n - data.fixed.length : n;
	const fitPart = df * (1 + Math.log((2 * Math.PI * rss) / df));
	const logDetA = method === 'REML' ? logDeterminantFromCholesky(inner.lower) : 0;
	return logDeterminantFromCholesky(factor.lower) + logDetA + fitPart;
}

const seeds = fc.integer({ min: 0, max: 10_000 });
const part = fc.double({ min: -1.5, max: 1.5, noNaN: true });

describe('the criterion', () => {
	it('by sums is the criterion by its definition', () => {
		const property = fc.property(seeds, part, part, part, (seed, a, b, d) => {
			const data = simulate(seed);
			const summed = sumModel(data);
			if (!summed.ok) throw new Error(summed.reason);
			const [c11, c21, c22] = summed.sums.spread;
			const [l11, l21, l22] = [c11 * a, c21 * a + c22 * b, c22 * d];
			const D = [l11 * l11, l11 * l21, l21 * l21 + l22 * l22] as const;
			for (const method of ['REML', 'ML'] as const) {
				const got = computeProfile(summed.sums, [a, b, d], method).criterion;
				expect(got).toBeCloseTo(computePlainly(data, D, method), 8);
			}
		});
		fc.assert(property, { seed: 111, numRuns: 10 });
	});

	it('has the gradient that its differences show', () => {
		const property = fc.property(seeds, part, part, part, (seed, a, b, d) => {
			const summed = sumModel(simulate(seed));
			if (!summed.ok) throw new Error(summed.reason);
			for (const method of ['REML', 'ML'] as const) {
				const at = (theta: Theta) => evaluateCriterion(summed.sums, theta, method);
				const { gradient } = at([a, b, d]);
				const steps: Theta[] = [
					[1, 0, 0],
					[0, 1, 0],
					[0, 0, 1]
				];
				steps.forEach(([u, v, w], k) => {
					const move = (h: number) => at([a + h * u, b + h * v, d + h * w]).profile.criterion;
					const slope = (move(1e-5) - move(-1e-5)) / 2e-5;
					expect(Math.abs(slope - (gradient[k] ?? NaN))).toBeLessThan(1e-4 * (1 + Math.abs(slope)));
				});
			}
		});
		fc.assert(property, { seed: 112, numRuns: 30 });
	});
});

describe('the fit', () => {
	it('is no worse than any theta around it', () => {
		const property = fc.property(seeds, part, part, part, (seed, a, b, d) => {
			const { solution, criterion } = fit(simulate(seed, seed % 3 === 0 ? 0 : 0.2));
			const [x, y, z] = solution.at.theta;
			for (const size of [1e-3, 0.1, 1]) {
				const theta: Theta = [x + size * a, y + size * b, z + size * d];
				const other = computeProfile(solution.sums, theta, 'REML').criterion;
				expect(other).toBeGreaterThanOrEqual(criterion - 1e-9);
			}
		});
		fc.assert(property, { seed: 113, numRuns: 60 });
	});

	it('does not depend on units or on where time starts', () => {
		const property = fc.property(seeds, (seed) => {
			const data = simulate(seed);
			const plain = fit(data);
			const scaled = fit({ ...data, y: data.y.map((y) => 1000 * y) });
			expect(scaled.coefficients[1]).toBeCloseTo(1000 * (plain.coefficients[1] ?? NaN), 4);
			const later = (column: number[]) => column.map((day) => 86_400_000 * (day + 40));
			const [ones, day, arm, both] = data.fixed;
			const moved = fit({
				...data,
				fixed: [ones ?? [], later(day ?? []), arm ?? [], both ?? []],
				random: [ones ?? [], later(day ?? [])]
			});
			const shift = 2 * 2 * Math.log(1) + 2 * Math.log(86_400_000);
			expect(moved.criterion - shift).toBeCloseTo(plain.criterion, 6);
			expect(moved.residualSd).toBeCloseTo(plain.residualSd, 5);
		});
		fc.assert(property, { seed: 114, numRuns: 20 });
	});

	it('predicts effects that sum to 0 over people when the fixed effects hold the same columns', () => {
		const { predictedEffects } = fit(simulate(3));
		expect(predictedEffects).toHaveLength(16);
		for (const k of [0, 1]) {
			const sum = predictedEffects.reduce((total, effects) => total + (effects[k] ?? NaN), 0);
			expect(Math.abs(sum)).toBeLessThan(1e-9);
		}
	});

	it('gives degrees of freedom between 1 and the rows, by both methods, also when singular', () => {
		const property = fc.property(seeds, (seed) => {
			const data = simulate(seed, 0);
			const got = fit(data);
			const df = createSatterthwaite(got.solution)([0, 0, 0, 1]);
			expect(df).toBeGreaterThan(1);
			expect(df).toBeLessThan(5 * data.y.length);
			const adjusted = computeKenwardRoger(got.solution);
			if (!adjusted.ok) return;
			const { df: second, scale } = adjusted.test([[0, 0, 0, 1]]);
			expect(Number.isFinite(second) && Number.isFinite(scale)).toBe(true);
		});
		fc.assert(property, { seed: 115, numRuns: 40 });
	});

	it('of two contrasts at once has one common number of degrees of freedom', () => {
		const got = fit(simulate(5));
		const adjusted = computeKenwardRoger(got.solution);
		if (!adjusted.ok) throw new Error(adjusted.reason);
		const { df, scale } = adjusted.test([
			[0, 0, 1, 0],
			[0, 0, 0, 1]
		]);
		expect(df).toBeGreaterThan(2);
		expect(scale).toBeGreaterThan(0.5);
		expect(scale).toBeLessThanOrEqual(1.01);
	});
});

describe('data that allow no fit', () => {
	const data = simulate(1);
	const [ones, day] = data.random;
	it.each([
		['collinear', { ...data, fixed: [ones ?? [], day ?? [], (day ?? []).map((x) => 2 * x)] }],
		['too-few-groups', { ...data, group: data.y.map(() => 0) }],
		['too-few-groups', { ...data, group: data.y.map((_, i) => i) }],
		['no-residual', { ...data, y: (day ?? []).map((x) => 3 * x + 1) }]
	])('say %s', (reason, given) => {
		expect(fitMixedModel(given, 'REML')).toEqual({ ok: false, reason });
	});

	it('columns of different lengths, and what is no number, are refused', () => {
		expect(() => fitMixedModel({ ...data, group: [0, 1] }, 'REML')).toThrow(RangeError);
		const broken = data.y.map((y, i) => (i === 3 ? Number.NaN : y));
		expect(() => fitMixedModel({ ...data, y: broken }, 'REML')).toThrow(/row 4/);
	});
});
