import { describe, expect, it } from 'vitest';
import { computeChiSquareQuantile } from '../../scheduler/statistics/chi-square.ts';
import { computeFUpperQuantile } from '../../scheduler/statistics/f-distribution.ts';
import { computeStudentTQuantile } from '../../scheduler/statistics/student-t.ts';

describe('NIST/SEMATECH e-Handbook of Statistical Methods, section 1.3.6.7', () => {
	// 1.3.6.7.4, lower critical values, as reprinted in a textbook's appendix (September 2011):
	// probability of exceeding .90, .95, .975, .99, .999.
	it.each([
		[2, [0.211, 0.103, 0.051, 0.02, 0.002]],
		[6, [2.204, 1.635, 1.237, 0.872, 0.381]],
		[10, [4.865, 3.94, 3.247, 2.558, 1.479]],
		[24, [15.659, 13.848, 12.401, 10.856, 8.085]],
		[60, [46.459, 43.188, 40.482, 37.485, 31.738]],
		[100, [82.358, 77.929, 74.222, 70.065, 61.918]]
	])('chi-square, %d df', (df, values) => {
		[0.1, 0.05, 0.025, 0.01, 0.001].forEach((p, i) => {
			expect(Math.abs(computeChiSquareQuantile(p, df) - (values[i] ?? NaN))).toBeLessThan(5.1e-4);
		});
	});

	// 1.3.6.7.2, with more digits as in a public table that names it as its source:
	// probability below .9, .95, .975, .99, .995, .9975, .999, .9995.
	it.each([
		[1, [3.0776835, 6.3137515, 12.706205, 31.820516, 63.656741, 127.32134, 318.30884, 636.61925]],
		[2, [1.8856181, 2.9199856, 4.3026527, 6.9645567, 9.9248432, 14.089047, 22.327125, 31.599055]],
		[3, [1.6377444, 2.3533634, 3.1824463, 4.5407029, 5.8409093, 7.4533185, 10.214532, 12.923979]],
		[4, [1.5332063, 2.1318468, 2.7764451, 3.7469474, 4.6040949, 5.5975684, 7.1731822, 8.6103016]]
	])('Student t, %d df', (df, values) => {
		[0.9, 0.95, 0.975, 0.99, 0.995, 0.9975, 0.999, 0.9995].forEach((p, i) => {
			const ratio = computeStudentTQuantile(p, df) / (values[i] ?? NaN);
			expect(Math.abs(ratio - 1)).toBeLessThan(1e-7);
		});
	});

	// 1.3.6.7.3, upper critical values: written down from memory, not looked up.
	it.each([
		[1, 1, 0.05, 161.448],
		[2, 1, 0.05, 199.5],
		[1, 10, 0.05, 4.965],
		[3, 10, 0.05, 3.708],
		[10, 10, 0.05, 2.978],
		[5, 20, 0.05, 2.711],
		[4, 30, 0.05, 2.69],
		[1, 10, 0.01, 10.044],
		[5, 20, 0.01, 4.103]
	])('F, %d and %d df, at %d', (df1, df2, tail, value) => {
		expect(Math.abs(computeFUpperQuantile(tail, df1, df2) - value)).toBeLessThan(5.1e-4);
	});
});
