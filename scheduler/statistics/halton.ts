const PRIMES = [
	...[2, 3, 5, 7, 11, 13, 17, 19, 23, 29, 31, 37, 41, 43, 47, 53, 59, 61, 67, 71, 73, 79, 83, 89],
	...[97, 101, 103, 107, 109, 113, 127, 131, 137, 139, 149, 151, 157, 163, 167, 173, 179, 181, 191]
];

/**
 * Evenly spread points of the unit cube in a few dimensions, the same every time.
 *
 * Shapes:  result (count × dimensions), entries strictly between 0 and 1.
 * Method:  radical inverses of 1, 2, … in the first primes.
 * Source:  Halton 1960, Numer Math 2:84.
 * @throws {RangeError} more dimensions than primes are kept
 */
export function computeHalton(count: number, dimensions: number): number[][] {
	const bases = PRIMES.slice(0, dimensions);
	if (bases.length < dimensions)
		throw new RangeError(`computeHalton has ${PRIMES.length} dimensions, not ${dimensions}`);
	return Array.from({ length: count }, (_, i) => bases.map((base) => invertDigits(i + 1, base)));
}

function invertDigits(index: number, base: number): number {
	let value = 0;
	let weight = 1 / base;
	for (let rest = index; rest > 0; rest = Math.floor(rest / base)) {
		value += (rest % base) * weight;
		weight /= base;
	}
	return value;
}
