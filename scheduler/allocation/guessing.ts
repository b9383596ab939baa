/**
 * How much of a permuted block of two equal arms somebody can guess who sees all earlier allocations.
 *
 * Shapes: block size in, counts out. Units: guesses, people.
 * Method: guessing the arm that is behind is right b/2 + (4^m / C(2m, m) - 1) / 2 times of b = 2m;
 * here by recursion over the places left, which holds for any weights.
 * Source: D. Blackwell and J. Hodges, Ann Math Stat 28 (1957); method sheet E.
 * Accuracy: relative 1e-12; scheduler/allocation/guessing.test.ts, case permuted-block-4.
 * @throws RangeError when there are fewer than two arms or a count is no whole number from 1
 * @example computeGuessing([2, 2]) // expectedCorrect 2.8333, 6 blocks
 */
export function computeGuessing(placesOfArms: readonly number[]): {
	/** Different arrangements of the block. */
	arrangementCount: number;
	/** Right guesses of one who always names an arm with the most places left. */
	expectedCorrect: number;
	/** The same less what the best blind guess would have. */
	excess: number;
	/** Largest difference between two arms inside the block. */
	largestImbalance: number;
} {
	const good = placesOfArms.length >= 2 && placesOfArms.every((n) => Number.isInteger(n) && n > 0);
	if (!good) throw new RangeError('each of two or more arms needs a whole number of places');
	const expectedCorrect = guessRest([...placesOfArms], new Map());
	const largest = Math.max(...placesOfArms);
	return {
		arrangementCount: countArrangements(placesOfArms),
		expectedCorrect,
		excess: expectedCorrect - largest,
		largestImbalance: largest
	};
}

function guessRest(left: readonly number[], known: Map<string, number>): number {
	const total = left.reduce((sum, n) => sum + n, 0);
	if (total === 0) return 0;
	const key = left.toSorted((a, b) => a - b).join();
	const before = known.get(key);
	if (before !== undefined) return before;
	const largest = Math.max(...left);
	const value = left.reduce(
		(sum, n, arm) =>
			n === 0
				? sum
				: sum +
					(n / total) *
						guessRest(
							left.map((m, k) => (k === arm ? m - 1 : m)),
							known
						),
		largest / total
	);
	known.set(key, value);
	return value;
}

function countArrangements(places: readonly number[]): number {
	let count = 1;
	let filled = 0;
	for (const n of places)
		for (let i = 1; i <= n; i += 1) {
			filled += 1;
			count = (count * filled) / i;
		}
	return Math.round(count);
}
