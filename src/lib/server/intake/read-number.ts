/** A number read from a field: a value, a blank, or a text that is no number. */
export type ReadNumber = { kind: 'value'; value: number } | { kind: 'blank' } | { kind: 'fault' };

const blanks = new Set(['', 'na', 'n/a', 'nan', 'null', '-', '.']);

/**
 * Reads a decimal number. A thousands separator is accepted only where it cannot be a decimal sign:
 * in groups of three before a decimal part written with the other sign.
 */
export function readNumber(field: string, decimalSign: '.' | ','): ReadNumber {
	const text = field.trim();
	if (blanks.has(text.toLowerCase())) return { kind: 'blank' };
	const group = decimalSign === '.' ? ',' : '\\.';
	const decimal = decimalSign === '.' ? '\\.' : ',';
	const grouped = new RegExp(`^[-+]?\\d{1,3}(${group}\\d{3})+(${decimal}\\d+)?$`);
	const plain = new RegExp(`^[-+]?(\\d+(${decimal}\\d*)?|${decimal}\\d+)(e[-+]?\\d+)?$`, 'i');
	if (!plain.test(text) && !grouped.test(text)) return { kind: 'fault' };
	const bare =
		grouped.test(text) && !plain.test(text) ? text.replace(new RegExp(group, 'g'), '') : text;
	const value = Number(decimalSign === ',' ? bare.replace(',', '.') : bare);
	return Number.isFinite(value) ? { kind: 'value', value } : { kind: 'fault' };
}

/** Factors to the first unit of each row: length, speed, angle, time, force. */
const families: Record<string, number>[] = [
	{ m: 1, cm: 0.01, mm: 0.001 },
	{ 'm/s': 1, 'cm/s': 0.01, 'mm/s': 0.001 },
	{ rad: 1, deg: Math.PI / 180 },
	{ s: 1, ms: 0.001, min: 60 },
	{ N: 1, kN: 1000, mN: 0.001 }
];

/** The factor that turns `from` into `to`; null when the two units measure different things. */
export function findUnitFactor(from: string, to: string): number | null {
	if (from === to) return 1;
	for (const family of families) {
		const [a, b] = [family[from], family[to]];
		if (a !== undefined && b !== undefined) return a / b;
	}
	return null;
}

/** Every unit that a column may name. */
export const knownUnits = families.flatMap((family) => Object.keys(family));
