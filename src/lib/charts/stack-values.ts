export interface StackedValue {
	readonly value: number;
	readonly filled: boolean;
	/** 0 stands on the line. */
	readonly level: number;
}

/** Piles equal values up, the filled ones at the bottom. */
export function stackValues(
	values: readonly { value: number; filled?: boolean }[]
): StackedValue[] {
	const height = new Map<number, number>();
	const order = [...values].sort((a, b) => Number(b.filled ?? false) - Number(a.filled ?? false));
	return order.map(({ value, filled = false }) => {
		const level = height.get(value) ?? 0;
		height.set(value, level + 1);
		return { value, filled, level };
	});
}
