import { computeBetaQuantile, computeBetaUpperQuantile } from './beta-distribution.ts';
import type { ShareArguments } from './wilson-interval.ts';

/**
 * Two-sided confidence interval of a share that never covers less than its level.
 *
 * Shapes: counts in, { lower, upper } out. Units: shares 0 to 1.
 * Method: beta quantiles (inversion of the two one-sided exact binomial tests).
 * Source: C. Clopper and E. Pearson, Biometrika 26 (1934); R binom.test.
 * Accuracy: relative 1e-10; tests/reference/statistics-sheet.test.ts, case binomial-intervals.
 * @throws RangeError when counts do not fit together or the level is not between 0 and 1
 * @example computeClopperPearsonInterval({ successCount: 17, trialCount: 24, level: 0.95 })
 * // { lower: 0.489052, upper: 0.873848 }
 */
export function computeClopperPearsonInterval(options: ShareArguments): {
	lower: number;
	upper: number;
} {
	const { successCount: x, trialCount: n, level } = options;
	if (!(Number.isInteger(n) && n > 0 && Number.isInteger(x) && x >= 0 && x <= n))
		throw new RangeError(`counts must be whole, 0 to trialCount; got ${x} of ${n}`);
	if (!(level > 0 && level < 1))
		throw new RangeError(`level must be between 0 and 1, got ${level}`);
	const tail = (1 - level) / 2;
	return {
		lower: x === 0 ? 0 : computeBetaQuantile(tail, { a: x, b: n - x + 1 }),
		upper: x === n ? 1 : computeBetaUpperQuantile(tail, { a: x + 1, b: n - x })
	};
}
