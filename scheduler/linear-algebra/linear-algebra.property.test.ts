import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { computeCholesky, solveWithCholesky } from './cholesky.ts';
import { addMatrices, crossProduct, diagonal, multiplyMatrices, transpose } from './matrix.ts';
import { computeSymmetricEigen } from './symmetric-eigen.ts';
import { dot, multiplyVector, norm, scale, subtract } from './vector.ts';

/** Positive definite matrices of 1 to 5 rows with eigenvalues between about 0.1 and 500. */
const positive = fc.integer({ min: 1, max: 5 }).chain((d) =>
	fc
		.array(fc.array(fc.double({ min: -4, max: 4, noNaN: true }), { minLength: d, maxLength: d }), {
			minLength: d,
			maxLength: d
		})
		.map((rows) => addMatrices(crossProduct(rows), diagonal(rows.map(() => 0.1))))
);

describe('computeSymmetricEigen', () => {
	it('gives unit vectors with A·v = λ·v, values ascending', () => {
		fc.assert(
			fc.property(positive, (A) => {
				const { values, vectors } = computeSymmetricEigen(A);
				vectors.forEach((v, i) => {
					const miss = subtract(multiplyVector(A, v), scale(v, values[i] ?? NaN));
					expect(norm(miss)).toBeLessThan(1e-10);
					expect(dot(v, v)).toBeCloseTo(1, 12);
				});
				expect([...values].sort((a, b) => a - b)).toEqual(values);
			})
		);
	});

	it('keeps the trace', () => {
		fc.assert(
			fc.property(positive, (A) => {
				const trace = A.reduce((sum, row, i) => sum + (row[i] ?? 0), 0);
				const { values } = computeSymmetricEigen(A);
				expect(values.reduce((sum, value) => sum + value, 0)).toBeCloseTo(trace, 9);
			})
		);
	});

	it('finds the exact zero of a flat direction', () => {
		expect(
			computeSymmetricEigen([
				[3, 0],
				[0, 0]
			]).values
		).toEqual([0, 3]);
	});

	it('throws on a number that is not finite', () => {
		expect(() => computeSymmetricEigen([[NaN]])).toThrow('finite');
	});
});

describe('computeCholesky', () => {
	it('gives L with L·Lᵀ = A', () => {
		fc.assert(
			fc.property(positive, (A) => {
				const factor = computeCholesky(A);
				expect(factor.ok).toBe(true);
				if (!factor.ok) return;
				const product = multiplyMatrices(factor.lower, transpose(factor.lower));
				product.flat().forEach((value, i) => expect(value).toBeCloseTo(A.flat()[i] ?? NaN, 9));
			})
		);
	});

	it('solves A·x = b', () => {
		fc.assert(
			fc.property(positive, (A) => {
				const factor = computeCholesky(A);
				const b = A.map((_, i) => i - 1.5);
				const x = factor.ok ? solveWithCholesky(factor.lower, b) : [];
				expect(norm(subtract(multiplyVector(A, x), b))).toBeLessThan(1e-8);
			})
		);
	});

	it('refuses a matrix that is flat in one direction', () => {
		expect(
			computeCholesky([
				[1, 1],
				[1, 1]
			]).ok
		).toBe(false);
		expect(
			computeCholesky([
				[1, 2],
				[2, 1]
			]).ok
		).toBe(false);
	});
});
