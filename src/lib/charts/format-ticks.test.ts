import { describe, expect, it } from 'vitest';
import { formatShare, formatTicks } from './format-ticks';

const texts = (values: number[], suffix?: string) =>
	formatTicks(values, suffix).map((tick) => tick.text);

describe('formatTicks', () => {
	it('writes all ticks with the digits their step needs', () => {
		expect(texts([0, 0.1, 0.2])).toEqual(['0.0', '0.1', '0.2']);
		expect(texts([0, 5, 10], '°')).toEqual(['0°', '5°', '10°']);
		expect(texts([1.25, 1.5])).toEqual(['1.25', '1.50']);
	});

	it('parts thousands and writes a true minus', () => {
		expect(texts([-1000, 0, 1000])).toEqual(['−1,000', '0', '1,000']);
		expect(texts([999_000, 1_000_000])).toEqual(['999,000', '1,000,000']);
		expect(texts([-0.0000001, 1])).toEqual(['0', '1']);
	});
});

describe('formatShare', () => {
	it('leaves the leading zero out', () => {
		expect([formatShare(0.861), formatShare(1), formatShare(-0.17), formatShare(0)]).toEqual([
			'.86',
			'1.00',
			'−.17',
			'.00'
		]);
	});
});
