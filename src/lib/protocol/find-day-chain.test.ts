import { describe, expect, it } from 'vitest';
import { findDayChain, type ChainGap } from './find-day-chain';

const daily: ChainGap = { minHours: 20, maxHours: 28, nightsBetween: 1, clockSpreadHours: 4 };
const workdays = [1, 2, 3, 4, 5];
const noPause = { count: 0, minHours: 68, maxHours: 100 };

describe('findDayChain', () => {
	it('lets five daily visits fit Monday to Friday', () => {
		const gaps = Array.from({ length: 4 }, () => daily);
		expect(findDayChain(gaps, { weekdays: workdays, pauses: noPause })).toEqual({ ok: true });
	});

	it('finds no week for six daily visits on workdays without a pause', () => {
		const gaps = Array.from({ length: 5 }, () => daily);
		expect(findDayChain(gaps, { weekdays: workdays, pauses: noPause })).toEqual({
			ok: false,
			gapIndex: 4,
			reason: 'weekdays'
		});
	});

	it('lets one pause of 68 to 100 hours carry six daily visits over the weekend', () => {
		const gaps = Array.from({ length: 5 }, () => daily);
		const pauses = { ...noPause, count: 1 };
		expect(findDayChain(gaps, { weekdays: workdays, pauses })).toEqual({ ok: true });
	});

	it('blames the hours when nights and hours contradict each other', () => {
		const gap = { ...daily, nightsBetween: 2 };
		expect(findDayChain([gap], { weekdays: [1, 2, 3, 4, 5, 6, 7], pauses: noPause })).toEqual({
			ok: false,
			gapIndex: 0,
			reason: 'hours'
		});
	});

	it('blames the weekdays for a daily gap between Monday and Wednesday only', () => {
		expect(findDayChain([daily], { weekdays: [1, 3], pauses: noPause })).toEqual({
			ok: false,
			gapIndex: 0,
			reason: 'weekdays'
		});
	});

	it('counts a gap of hours inside one day as no night', () => {
		const gap = { minHours: 3, maxHours: 6, nightsBetween: 0, clockSpreadHours: 8 };
		expect(findDayChain([gap], { weekdays: [2], pauses: noPause })).toEqual({ ok: true });
	});
});
