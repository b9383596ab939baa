export interface Tick {
	readonly value: number;
	readonly text: string;
}

/** Ticks with as many digits as their steps need, and all alike. */
export function formatTicks(values: readonly number[], suffix = ''): Tick[] {
	const [first = 0, second = first + 1] = values;
	const digits = countDigits(second - first);
	return values.map((value) => ({ value, text: `${formatFixed(value, digits)}${suffix}` }));
}

/** A number with a fixed count of digits, thousands parted, a true minus, and no "−0". */
export function formatFixed(value: number, digits: number): string {
	const [whole = '', rest] = Math.abs(value).toFixed(digits).split('.');
	const size = whole.replace(/\B(?=(\d{3})+(?!\d))/g, ',') + (rest ? `.${rest}` : '');
	return value < 0 && /[1-9]/.test(size) ? `−${size}` : size;
}

/** 0.861 as ".86", the way shares and power are written; 1 stays "1.00". */
export function formatShare(share: number, digits = 2): string {
	return formatFixed(share, digits).replace(/^(−?)0\./, '$1.');
}

/** Fewest digits that write the step exactly; at most 6. */
function countDigits(step: number): number {
	for (let digits = 0; digits < 6; digits++) {
		const scaled = Math.abs(step) * 10 ** digits;
		if (scaled > 0.5 && Math.abs(scaled - Math.round(scaled)) < 1e-6) return digits;
	}
	return 6;
}
