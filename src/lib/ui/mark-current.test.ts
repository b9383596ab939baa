import { describe, expect, it } from 'vitest';
import { markCurrent } from './mark-current';

const sections = [
	{ href: '/studies/a', label: 'Today' },
	{ href: '/studies/a/people', label: 'People' }
];
const current = (pathname: string) =>
	markCurrent(sections, pathname)
		.filter((section) => section.current)
		.map((section) => section.label);

describe('markCurrent', () => {
	it('marks the deepest section the page lies in', () => {
		expect(current('/studies/a/people/new')).toEqual(['People']);
		expect(current('/studies/a')).toEqual(['Today']);
	});

	it('does not take a longer name for the same section', () => {
		expect(current('/studies/ab')).toEqual([]);
	});

	it('marks nothing outside the sections', () => {
		expect(current('/account')).toEqual([]);
	});
});
