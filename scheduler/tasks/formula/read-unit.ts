/** What a unit measures: powers of the base quantities, and its size in base units. */
export interface Dimension {
	/** By base unit (m, kg, s, A, K, mol, cd, and what is not known to the table, by its own name). */
	readonly powers: Readonly<Record<string, number>>;
	/** One of this unit in base units: 0.01 for cm, π/180 for deg. */
	readonly size: number;
}

export const NO_DIMENSION: Dimension = { powers: {}, size: 1 };

const base = (name: string, size = 1): Dimension => ({ powers: { [name]: 1 }, size });
const bare = (size: number): Dimension => ({ powers: {}, size });
const newton = { powers: { kg: 1, m: 1, s: -2 }, size: 1 };

/** Units as laboratories write them; SI prefixes are read before those marked so. */
const units: Readonly<Record<string, Dimension>> = {
	...{ m: base('m'), g: base('kg', 1e-3), s: base('s'), A: base('A'), K: base('K') },
	...{ N: newton, Hz: { powers: { s: -1 }, size: 1 }, J: product(newton, base('m')) },
	...{ W: { powers: { kg: 1, m: 2, s: -3 }, size: 1 }, Pa: product(newton, power(base('m'), -2)) },
	...{ V: { powers: { kg: 1, m: 2, s: -3, A: -1 }, size: 1 } },
	...{ min: base('s', 60), h: base('s', 3600), bit: base('bit'), px: base('px'), au: base('au') },
	...{ rad: bare(1), deg: bare(Math.PI / 180), '°': bare(Math.PI / 180) },
	...{ degree: bare(Math.PI / 180), degrees: bare(Math.PI / 180), '%': bare(0.01), '1': bare(1) }
};
const prefixed = new Set(['m', 'g', 's', 'A', 'K', 'N', 'Hz', 'J', 'W', 'Pa', 'V']);
const prefixes: Readonly<Record<string, number>> = {
	...{ n: 1e-9, µ: 1e-6, μ: 1e-6, u: 1e-6, m: 1e-3, c: 1e-2, d: 0.1, k: 1e3, M: 1e6, G: 1e9 }
};
const raised: Readonly<Record<string, string>> = {
	...{ '⁰': '0', '¹': '1', '²': '2', '³': '3', '⁴': '4', '⁵': '5', '⁶': '6', '⁻': '-' }
};

const FACTOR = /^([^\d^*·/()\s⁰¹²³⁴⁵⁶⁻-]+|1)(?:\^?(-?\d+(?:\.\d+)?)|([⁻⁰¹²³⁴⁵⁶]+))?$/;

/**
 * Reads a unit such as `m/s²`, `N·m` or `deg/s`. A name the table does not know counts as a quantity of
 * its own, which equals only itself. Null for a text that is no unit at all.
 *
 * @example readUnit('cm') // { powers: { m: 1 }, size: 0.01 }
 */
export function readUnit(text: string): Dimension | null {
	const trimmed = text.trim();
	if (trimmed === '') return NO_DIMENSION;
	const [above, ...below] = trimmed.split('/');
	const parts = [above ?? '', ...below].map(readProduct);
	return parts.reduce<Dimension | null>((sum, part, index) => {
		if (!sum || !part) return null;
		return index === 0 ? part : product(sum, power(part, -1));
	}, NO_DIMENSION);
}

function readProduct(text: string): Dimension | null {
	const factors = text
		.replace(/[()]/g, '')
		.split(/[\s*·]+/)
		.filter((factor) => factor !== '');
	if (factors.length === 0) return null;
	return factors.map(readFactor).reduce<Dimension | null>((sum, factor) => {
		return sum && factor ? product(sum, factor) : null;
	}, NO_DIMENSION);
}

function readFactor(text: string): Dimension | null {
	const match = FACTOR.exec(text);
	if (!match?.[1]) return null;
	const small = [...(match[3] ?? '')].map((sign) => raised[sign]).join('');
	const exponent = Number(match[2] ?? (small || '1'));
	return Number.isFinite(exponent) ? power(readName(match[1]), exponent) : null;
}

function readName(name: string): Dimension {
	const known = units[name];
	if (known) return known;
	const rest = units[name.slice(1)];
	const factor = prefixes[name.charAt(0)];
	if (rest && factor && prefixed.has(name.slice(1))) return { ...rest, size: rest.size * factor };
	return base(name);
}

export function product(a: Dimension, b: Dimension): Dimension {
	const powers: Record<string, number> = { ...a.powers };
	for (const [name, exponent] of Object.entries(b.powers)) {
		const sum = (powers[name] ?? 0) + exponent;
		if (sum === 0) delete powers[name];
		else powers[name] = sum;
	}
	return { powers, size: a.size * b.size };
}

export function power({ powers, size }: Dimension, exponent: number): Dimension {
	if (exponent === 0) return NO_DIMENSION;
	const raisedPowers = Object.entries(powers).map(([name, value]) => [name, value * exponent]);
	return { powers: Object.fromEntries(raisedPowers), size: size ** exponent };
}

/** Whether two units measure the same kind of quantity; their sizes may differ. */
export function isSameKind(a: Dimension, b: Dimension): boolean {
	const { powers } = product(a, power(b, -1));
	return Object.keys(powers).length === 0;
}

/** The base units as people write them: "m·s⁻¹"; "no unit" for none. */
export function writeKind({ powers }: Dimension): string {
	const superscript = (value: number) =>
		value === 1
			? ''
			: [...String(value)]
					.map((sign) => Object.keys(raised).find((key) => raised[key] === sign) ?? sign)
					.join('');
	const names = Object.entries(powers).map(([name, value]) => `${name}${superscript(value)}`);
	return names.length === 0 ? 'no unit' : names.join('·');
}
