import { expect, it } from 'vitest';
import { judgeRail } from './guard-rail';

it('counts each bound to the side that is allowed', () => {
	expect([30, 30.1, 60, 60.1].map((value) => judgeRail(value, 30, 60))).toEqual([
		'automatic',
		'held',
		'held',
		'never'
	]);
});

it('refuses rails the wrong way round', () => {
	expect(() => judgeRail(1, 60, 30)).toThrow(RangeError);
});
