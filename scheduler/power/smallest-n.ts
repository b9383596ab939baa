export type SmallestN =
	| {
			ok: true;
			/** Where the power is met exactly, before rounding up. */ exactN: number;
			n: number;
	  }
	| { ok: false; reason: 'no-effect' | 'beyond-limit' };

/**
 * The smallest n at which a power that rises with n reaches what is wanted.
 *
 * Shapes: function and wanted power in, n out. Units: those of the function's argument.
 * Method: doubling and bisection. Source: textbook.
 * Accuracy: relative 1e-12 of exactN; tests/reference/power-sheet.test.ts.
 * @throws RangeError when the wanted power is not between 0 and 1
 * @example findSmallestN({ computePower, power: 0.8, smallest: 2 })
 */
export function findSmallestN(options: {
	computePower: (n: number) => number;
	power: number;
	/** The smallest n for which the power can be computed. */
	smallest: number;
	/** No larger n is tried; a million when left out. */
	largest?: number;
}): SmallestN {
	const { computePower, power, smallest, largest = 1e6 } = options;
	if (!(power > 0 && power < 1)) throw new RangeError(`power must lie in 0 to 1, got ${power}`);
	const isEnough = (n: number) => computePower(n) >= power;
	const start = computePower(smallest);
	let high = smallest;
	while (!isEnough(high)) {
		if (high >= largest) {
			const grows = computePower(high) > start + 1e-9;
			return { ok: false, reason: grows ? 'beyond-limit' : 'no-effect' };
		}
		high = Math.min(largest, high * 2);
	}
	const exactN = bisect(Math.max(smallest, high / 2), high, isEnough);
	return { ok: true, exactN, n: Math.ceil(exactN - 1e-9) };
}

/** The point at which a rising condition becomes true, to a relative 1e-12. */
export function bisect(low: number, high: number, isEnough: (n: number) => boolean): number {
	if (isEnough(low)) return low;
	let [below, above] = [low, high];
	while (above - below > 1e-12 * above) {
		const middle = (below + above) / 2;
		if (isEnough(middle)) above = middle;
		else below = middle;
	}
	return above;
}
