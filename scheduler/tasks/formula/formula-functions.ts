/** Functions that a formula may use, with the count of values each takes. */
export const FORMULA_FUNCTIONS = {
	sin: 1,
	cos: 1,
	tan: 1,
	asin: 1,
	acos: 1,
	atan: 1,
	atan2: 2,
	sqrt: 1,
	exp: 1,
	log: 1,
	abs: 1,
	min: 2,
	max: 2
} as const;

export type FunctionName = keyof typeof FORMULA_FUNCTIONS;

export function isFunctionName(name: string): name is FunctionName {
	return Object.hasOwn(FORMULA_FUNCTIONS, name);
}

/** Functions of one value with their derivatives. */
export const ONE_VALUE: Record<
	Exclude<FunctionName, 'atan2' | 'min' | 'max'>,
	{ value: (x: number) => number; slope: (x: number) => number }
> = {
	sin: { value: Math.sin, slope: Math.cos },
	cos: { value: Math.cos, slope: (x) => -Math.sin(x) },
	tan: { value: Math.tan, slope: (x) => 1 / Math.cos(x) ** 2 },
	asin: { value: Math.asin, slope: (x) => 1 / Math.sqrt(1 - x * x) },
	acos: { value: Math.acos, slope: (x) => -1 / Math.sqrt(1 - x * x) },
	atan: { value: Math.atan, slope: (x) => 1 / (1 + x * x) },
	sqrt: { value: Math.sqrt, slope: (x) => 0.5 / Math.sqrt(x) },
	exp: { value: Math.exp, slope: Math.exp },
	log: { value: Math.log, slope: (x) => 1 / x },
	abs: { value: Math.abs, slope: Math.sign }
};

/** Functions of two values with both partial derivatives. */
export const TWO_VALUES: Record<
	'atan2' | 'min' | 'max',
	{
		value: (a: number, b: number) => number;
		slopes: (a: number, b: number) => readonly [number, number];
	}
> = {
	atan2: { value: Math.atan2, slopes: (y, x) => [x / (x * x + y * y), -y / (x * x + y * y)] },
	min: { value: Math.min, slopes: (a, b) => (a <= b ? [1, 0] : [0, 1]) },
	max: { value: Math.max, slopes: (a, b) => (a >= b ? [1, 0] : [0, 1]) }
};
