import { describe, expect, it } from 'vitest';
import { splitFigures } from './split-figures';

const figures = (text: string) =>
	splitFigures(text)
		.filter((part) => part.figure)
		.map((part) => part.text);

describe('splitFigures', () => {
	it('finds numbers, times and codes', () => {
		expect(figures('TW-017 comes at 09:30, 1,380 trials, hits .97')).toEqual([
			'TW-017',
			'09:30',
			'1,380',
			'.97'
		]);
	});

	it('leaves the comma and the full stop of the sentence outside', () => {
		expect(figures('In days: 5, 6, and at most 7.')).toEqual(['5', '6', '7']);
	});

	it('keeps signs with their number', () => {
		expect(figures('toll -.17 of +0.10 at ±.25')).toEqual(['-.17', '+0.10', '±.25']);
	});

	it('does not cut words that hold a digit', () => {
		expect(figures('cf87758d and v3')).toEqual([]);
	});

	it.each(['', 'no number', '12', 'a 1 b 2.5 c'])('gives the same text back: %j', (text) => {
		expect(
			splitFigures(text)
				.map((part) => part.text)
				.join('')
		).toBe(text);
	});
});
