/** The value that all have; undefined when they differ, or when there are none. */
export function sameValue<Value>(values: readonly Value[]): Value | undefined {
	const [first, ...others] = values;
	return others.every((value) => value === first) ? first : undefined;
}
