import { describe, expect, it } from 'vitest';
import { findMatches } from './find-matches';

const names = [
	'Protocol',
	'People',
	'Paste rows of a spreadsheet',
	'Progress',
	'Move down',
	'Team'
];
const find = (typed: string) => findMatches(typed, names, (name) => name);

describe('finding by a few letters', () => {
	it('keeps everything in its order while nothing is typed', () => {
		expect(find(' ')).toEqual(names);
	});

	it('asks for each word, in any order', () => {
		expect(find('rows paste')).toEqual(['Paste rows of a spreadsheet']);
		expect(find('paste people')).toEqual([]);
	});

	it('takes beginnings before what lies inside, and letters left out last', () => {
		expect(find('pro')).toEqual(['Protocol', 'Progress']);
		expect(find('prtcl')).toEqual(['Protocol']);
		expect(find('down')).toEqual(['Move down']);
	});
});
