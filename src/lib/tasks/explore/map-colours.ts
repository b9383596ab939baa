export type Theme = 'light' | 'dark';
export type Rgb = readonly [number, number, number];

/** OKLab stops from no miss to a large one: lightness falls evenly, the hue runs from straw over green to blue. */
const stops: Readonly<Record<Theme, readonly Rgb[]>> = {
	light: [
		[0.955, -0.002, 0.022],
		[0.835, -0.05, 0.058],
		[0.715, -0.082, 0.022],
		[0.595, -0.078, -0.028],
		[0.475, -0.04, -0.062],
		[0.355, -0.008, -0.064]
	],
	dark: [
		[0.66, -0.03, 0.036],
		[0.562, -0.052, 0.024],
		[0.464, -0.056, -0.006],
		[0.366, -0.034, -0.036],
		[0.268, -0.012, -0.04],
		[0.17, -0.004, -0.022]
	]
};

/** How the band of hits looks over the map. */
const bands: Readonly<Record<Theme, { colour: Rgb; share: number }>> = {
	light: { colour: [118, 172, 158], share: 0.62 },
	dark: { colour: [20, 62, 56], share: 0.74 }
};

/** Entries of the table below, one colour each. */
export const COLOUR_COUNT = 256;

/**
 * Colours of an error map as bytes: COLOUR_COUNT entries of red, green, blue for misses outside the band of
 * hits, then as many for inside.
 *
 * Method:  linear between stops in OKLab, clipped to sRGB. Lightness falls steadily for eyes with and
 *          without colour blindness (map-colours.test.ts).
 * Source:  B. Ottosson, A perceptual color space for image processing (2020).
 */
export function listMapColours(theme: Theme): Uint8ClampedArray {
	const table = new Uint8ClampedArray(2 * 3 * COLOUR_COUNT);
	const { colour, share } = bands[theme];
	for (let k = 0; k < COLOUR_COUNT; k++) {
		const plain = colourAt(theme, k / (COLOUR_COUNT - 1));
		table.set(plain, 3 * k);
		const mixed = plain.map((value, i) => (1 - share) * value + share * (colour[i] ?? 0));
		table.set(mixed, 3 * (COLOUR_COUNT + k));
	}
	return table;
}

/** Colour of a miss as a share of the scale's end, 0 to 1; sRGB bytes. */
export function colourAt(theme: Theme, share: number): Rgb {
	const list = stops[theme];
	const place = Math.min(1, Math.max(0, share)) * (list.length - 1);
	const index = Math.min(list.length - 2, Math.floor(place));
	const [from, to] = [list[index] ?? [0, 0, 0], list[index + 1] ?? [0, 0, 0]];
	const mix = (k: 0 | 1 | 2) => from[k] + (place - index) * (to[k] - from[k]);
	return toSrgb([mix(0), mix(1), mix(2)]);
}

function toSrgb([lightness, a, b]: Rgb): Rgb {
	const l = (lightness + 0.3963377774 * a + 0.2158037573 * b) ** 3;
	const m = (lightness - 0.1055613458 * a - 0.0638541728 * b) ** 3;
	const s = (lightness - 0.0894841775 * a - 1.291485548 * b) ** 3;
	return [
		toByte(4.0767416621 * l - 3.3077115913 * m + 0.2309699292 * s),
		toByte(-1.2684380046 * l + 2.6097574011 * m - 0.3413193965 * s),
		toByte(-0.0041960863 * l - 0.7034186147 * m + 1.707614701 * s)
	];
}

function toByte(linear: number): number {
	const clipped = Math.min(1, Math.max(0, linear));
	const value = clipped <= 0.0031308 ? 12.92 * clipped : 1.055 * clipped ** (1 / 2.4) - 0.055;
	return Math.round(255 * value);
}
