import { expect, it } from 'vitest';
import { stackValues } from './stack-values';

it('piles equal values up with the filled ones at the bottom', () => {
	expect(stackValues([{ value: 6 }, { value: 6, filled: true }, { value: 5 }])).toEqual([
		{ value: 6, filled: true, level: 0 },
		{ value: 6, filled: false, level: 1 },
		{ value: 5, filled: false, level: 0 }
	]);
});
