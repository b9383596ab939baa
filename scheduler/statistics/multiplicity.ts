/** How p values of several tests are adjusted. */
export const ADJUSTMENTS = ['bonferroni', 'holm', 'hochberg'] as const;
export type Adjustment = (typeof ADJUSTMENTS)[number];

/**
 * Adjusted p values of several tests: compare each with alpha, and the chance of any false claim is
 * at most alpha.
 *
 * Shapes: list of p values in, list in the same order out. Units: probabilities.
 * Method: Bonferroni multiplies by the count; Holm steps down from the smallest, Hochberg up from the
 * largest (valid for independent or positively dependent tests).
 * Source: S. Holm, Scand J Stat 6 (1979); Y. Hochberg, Biometrika 75 (1988); R p.adjust.
 * Accuracy: exact; scheduler/statistics/multiplicity.test.ts.
 * @throws RangeError when a p value is not in 0 to 1 or there is none
 * @example adjustPValues([0.01, 0.04, 0.03], 'holm') // [0.03, 0.06, 0.06]
 */
export function adjustPValues(pValues: readonly number[], method: Adjustment): number[] {
	if (pValues.length === 0) throw new RangeError('there must be at least one p value');
	pValues.forEach((p, i) => {
		if (!(p >= 0 && p <= 1)) throw new RangeError(`p value ${i + 1} must lie in 0 to 1, got ${p}`);
	});
	const count = pValues.length;
	if (method === 'bonferroni') return pValues.map((p) => Math.min(1, p * count));
	const order = pValues.map((p, place) => ({ p, place })).sort((a, b) => a.p - b.p);
	const stepped = order.map(({ p }, rank) => Math.min(1, p * (count - rank)));
	const monotone = method === 'holm' ? runningMax(stepped) : runningMinFromEnd(stepped);
	const adjusted = new Array<number>(count).fill(1);
	order.forEach(({ place }, rank) => {
		adjusted[place] = monotone[rank] ?? 1;
	});
	return adjusted;
}

function runningMax(values: readonly number[]): number[] {
	let largest = 0;
	return values.map((value) => (largest = Math.max(largest, value)));
}

function runningMinFromEnd(values: readonly number[]): number[] {
	let smallest = 1;
	return values
		.toReversed()
		.map((value) => (smallest = Math.min(smallest, value)))
		.toReversed();
}
