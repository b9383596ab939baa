/** Something people are known by before allocation, and its possible values. */
export type StratumFactor = { name: string; values: readonly string[] };

/**
 * The name of a person's stratum, the same however the values are listed.
 *
 * Shapes: factors and one value for each in, text out.
 * Method: JSON of [name, value] pairs in the order of the factors, so that no two strata share a name.
 * Source: method sheet E (permuted blocks for each stratum). Accuracy: exact;
 * scheduler/allocation/strata.test.ts.
 * @throws RangeError when a value is missing, unknown, or belongs to no factor
 * @example nameStratum([{ name: 'hand', values: ['left', 'right'] }], { hand: 'left' })
 */
export function nameStratum(
	factors: readonly StratumFactor[],
	values: Readonly<Record<string, string>>
): string {
	requireFactors(factors);
	const unknown = Object.keys(values).find((name) => !factors.some((f) => f.name === name));
	if (unknown !== undefined) throw new RangeError(`“${unknown}” is no factor of the strata`);
	return JSON.stringify(factors.map((factor) => [factor.name, readValue(factor, values)]));
}

/** The names of all strata: every combination of values. */
export function listStrata(factors: readonly StratumFactor[]): string[] {
	requireFactors(factors);
	const combinations = factors.reduce<Record<string, string>[]>(
		(before, { name, values }) =>
			before.flatMap((start) => values.map((value) => ({ ...start, [name]: value }))),
		[{}]
	);
	return combinations.map((values) => nameStratum(factors, values));
}

function readValue(factor: StratumFactor, values: Readonly<Record<string, string>>): string {
	const value = Object.hasOwn(values, factor.name) ? values[factor.name] : undefined;
	if (value === undefined) throw new RangeError(`a value of “${factor.name}” is missing`);
	if (!factor.values.includes(value))
		throw new RangeError(`“${factor.name}” is ${factor.values.join(' or ')}, not “${value}”`);
	return value;
}

function requireFactors(factors: readonly StratumFactor[]): void {
	if (new Set(factors.map(({ name }) => name)).size < factors.length)
		throw new RangeError('each factor needs a name of its own');
	for (const { name, values } of factors)
		if (values.length < 2 || new Set(values).size < values.length)
			throw new RangeError(`“${name}” needs at least two values, all different`);
}
