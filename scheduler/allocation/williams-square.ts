/**
 * Orders of treatments in which each follows each other equally often: once, or with an odd count
 * twice.
 *
 * Shapes: count of treatments t in, t sequences (t even) or 2t (t odd) of t numbers from 0 out.
 * Method: the order 0, 1, t-1, 2, t-2, …, and all its shifts; with an odd count also their mirror
 * images.
 * Source: E. Williams, Austral J Sci Res A 2 (1949).
 * Accuracy: exact; scheduler/allocation/williams-square.test.ts, cases williams-3 and williams-5.
 * @throws RangeError when the count is no whole number from 2
 * @example buildWilliamsSquare(3) // [[0, 1, 2], [1, 2, 0], [2, 0, 1], [2, 1, 0], [0, 2, 1], [1, 0, 2]]
 */
export function buildWilliamsSquare(treatmentCount: number): number[][] {
	const t = treatmentCount;
	if (!Number.isInteger(t) || t < 2)
		throw new RangeError(`treatmentCount must be a whole number from 2, got ${t}`);
	const first = Array.from({ length: t }, (_, i) => (i % 2 === 1 ? (i + 1) / 2 : (t - i / 2) % t));
	const shifts = Array.from({ length: t }, (_, k) => first.map((treatment) => (treatment + k) % t));
	return t % 2 === 0 ? shifts : [...shifts, ...shifts.map((order) => order.toReversed())];
}

/**
 * How balanced orders are: how often each treatment follows each other, and stands in each place.
 *
 * Shapes: sequences in; follows[a][b] and places[a][place] out. Units: counts.
 * @throws RangeError when the sequences differ in length or hold another treatment
 */
export function countOrders(sequences: readonly (readonly number[])[]): {
	follows: number[][];
	places: number[][];
} {
	const t = sequences[0]?.length ?? 0;
	const square = () => Array.from({ length: t }, () => new Array<number>(t).fill(0));
	const [follows, places] = [square(), square()];
	const bump = (row: number[] | undefined, at: number) => {
		if (!row || row[at] === undefined) throw new RangeError('a sequence holds another treatment');
		row[at] = (row[at] ?? 0) + 1;
	};
	for (const order of sequences) {
		if (order.length !== t) throw new RangeError('the sequences differ in length');
		order.forEach((treatment, place) => {
			bump(places[treatment], place);
			const before = order[place - 1];
			if (before !== undefined) bump(follows[before], treatment);
		});
	}
	return { follows, places };
}
