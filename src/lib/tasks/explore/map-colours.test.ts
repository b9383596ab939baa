import { describe, expect, it } from 'vitest';
import { colourAt, COLOUR_COUNT, listMapColours, type Rgb, type Theme } from './map-colours';

/** Machado, Oliveira & Fernandes 2009, IEEE TVCG 15:1291, severity 1. */
const eyes: Record<string, readonly Rgb[]> = {
	'all three cones': [
		[1, 0, 0],
		[0, 1, 0],
		[0, 0, 1]
	],
	protanopia: [
		[0.152286, 1.052583, -0.204868],
		[0.114503, 0.786281, 0.099216],
		[-0.003882, -0.048116, 1.051998]
	],
	deuteranopia: [
		[0.367322, 0.860646, -0.227968],
		[0.280085, 0.672501, 0.047413],
		[-0.01182, 0.04294, 0.968881]
	],
	tritanopia: [
		[1.255528, -0.076749, -0.178779],
		[-0.078411, 0.930809, 0.147602],
		[0.004733, 0.691367, 0.3039]
	]
};

/** CIE lightness of a colour as this eye sees it. */
function lightnessOf(colour: Rgb, eye: readonly Rgb[]): number {
	const linear = colour.map((byte) => {
		const value = byte / 255;
		return value <= 0.04045 ? value / 12.92 : ((value + 0.055) / 1.055) ** 2.4;
	});
	const seen = eye.map((row) =>
		Math.max(
			0,
			row.reduce((sum, weight, k) => sum + weight * (linear[k] ?? 0), 0)
		)
	);
	const [r = 0, g = 0, b = 0] = seen;
	const y = 0.2126 * r + 0.7152 * g + 0.0722 * b;
	return y > 0.008856 ? 116 * Math.cbrt(y) - 16 : 903.3 * y;
}

const themes: Theme[] = ['light', 'dark'];

describe.each(themes)('error map in the %s theme', (theme) => {
	it.each(Object.keys(eyes))('darkens steadily for %s', (name) => {
		const eye = eyes[name] ?? [];
		const steps = Array.from({ length: 33 }, (_, k) => lightnessOf(colourAt(theme, k / 32), eye));
		steps.slice(1).forEach((value, k) => expect(value).toBeLessThan((steps[k] ?? 0) - 0.4));
	});

	it('has even steps for eyes with three cones', () => {
		const eye = eyes['all three cones'] ?? [];
		const steps = Array.from({ length: 9 }, (_, k) => lightnessOf(colourAt(theme, k / 8), eye));
		const falls = steps.slice(1).map((value, k) => (steps[k] ?? 0) - value);
		expect(Math.max(...falls) / Math.min(...falls)).toBeLessThan(1.6);
	});

	it('lists every colour twice, outside and inside the band', () => {
		const table = listMapColours(theme);
		expect(table.length).toBe(6 * COLOUR_COUNT);
		expect([...table.slice(0, 3)]).toEqual([...colourAt(theme, 0)]);
		expect([...table.slice(0, 3)]).not.toEqual([
			...table.slice(3 * COLOUR_COUNT, 3 * COLOUR_COUNT + 3)
		]);
	});
});
