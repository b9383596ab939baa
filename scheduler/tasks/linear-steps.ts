/**
 * Evenly spaced values from the first to the last bound, both included.
 * @throws {RangeError} fewer than two values
 */
export function computeLinearSteps([from, to]: readonly [number, number], count: number): number[] {
	if (!(count >= 2)) throw new RangeError('computeLinearSteps requires at least two values');
	return Array.from({ length: count }, (_, i) => from + ((to - from) * i) / (count - 1));
}
