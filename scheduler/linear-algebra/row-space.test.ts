import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { removeDirections, splitRowSpace } from './row-space.ts';
import { computeSquareRoot, applyToEigenvalues } from './symmetric-function.ts';
import { crossProduct, multiplyMatrices } from './matrix.ts';
import { dot, norm } from './vector.ts';

const value = fc.integer({ min: -5_000_000, max: 5_000_000 }).map((x) => x / 1e6);
const jacobian = fc
	.integer({ min: 1, max: 3 })
	.chain((r) =>
		fc.array(fc.array(value, { minLength: 5, maxLength: 5 }), { minLength: r, maxLength: r })
	);

describe('splitRowSpace', () => {
	it('gives orthonormal directions of the whole space, the complement unseen by J', () => {
		fc.assert(
			fc.property(jacobian, (J) => {
				const { basis, complement } = splitRowSpace(J);
				const all = [...basis, ...complement];
				expect(all).toHaveLength(5);
				all.forEach((u, i) =>
					all.forEach((v, j) => expect(dot(u, v)).toBeCloseTo(i === j ? 1 : 0, 12))
				);
				const size = Math.max(...J.map(norm));
				for (const values of J) {
					expect(norm(removeDirections(values, basis))).toBeLessThanOrEqual(1e-9 * size);
					complement.forEach((v) =>
						expect(Math.abs(dot(values, v))).toBeLessThanOrEqual(1e-9 * size)
					);
				}
			})
		);
	});

	it('counts a row that repeats another once, and rows of zeros not at all', () => {
		expect(
			splitRowSpace([
				[1, 2, 3],
				[2, 4, 6]
			]).basis
		).toHaveLength(1);
		expect(splitRowSpace([[0, 0]]).basis).toHaveLength(0);
		expect(splitRowSpace([[0, 0]]).complement).toHaveLength(2);
	});

	it('refuses what is no number', () => {
		expect(() => splitRowSpace([[Number.NaN, 1]])).toThrow(RangeError);
		expect(() => splitRowSpace([[1, 2], [1]])).toThrow(RangeError);
	});
});

describe('functions of a symmetric matrix', () => {
	it('the square root times itself is the matrix, exp undoes log', () => {
		fc.assert(
			fc.property(jacobian, (J) => {
				const A = crossProduct(J).map((values, i) => values.map((x, j) => x + (i === j ? 0.5 : 0)));
				const root = computeSquareRoot(A);
				const back = multiplyMatrices(root, root);
				const logThenExp = applyToEigenvalues(applyToEigenvalues(A, Math.log), Math.exp);
				A.flat().forEach((wanted, i) => {
					expect(back.flat()[i]).toBeCloseTo(wanted, 9);
					expect(logThenExp.flat()[i]).toBeCloseTo(wanted, 9);
				});
			})
		);
	});
});
