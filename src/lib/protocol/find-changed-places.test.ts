import { expect, it } from 'vitest';
import { findChangedPlaces } from './find-changed-places';

it('names each single value that differs', () => {
	const before = { a: { b: [1, 2] }, c: 'x', d: null };
	expect(findChangedPlaces(before, { ...before, a: { b: [1, 3] }, d: 4 })).toEqual(['a.b.1', 'd']);
	expect(findChangedPlaces(before, before)).toEqual([]);
});

it('says null when something came or went', () => {
	expect(findChangedPlaces({ a: [1] }, { a: [1, 2] })).toBeNull();
	expect(findChangedPlaces({ a: null }, { a: { b: 1 } })).toBeNull();
	expect(findChangedPlaces({ a: 1 }, { b: 1 })).toBeNull();
});
