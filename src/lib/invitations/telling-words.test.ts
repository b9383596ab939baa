import { describe, expect, it } from 'vitest';
import { findTellingWords } from './telling-words';

describe('telling words', () => {
	it.each([
		['Adaptive practice of a sliding movement', ['adaptive']],
		['Visit of the control group', ['control group']],
		['Yoked arm, day 2', ['yoked', 'arm']],
		['Left hand training after stroke', ['left hand', 'stroke']],
		['Puck release, FIXED condition', ['fixed', 'condition']]
	])('are found in "%s"', (text, words) => {
		expect(findTellingWords(text)).toEqual(words);
	});

	it.each([
		'Practising a sliding movement',
		'Army House, Harmony Street',
		'Your visit: Mon 29 Mar'
	])('are not found in "%s"', (text) => expect(findTellingWords(text)).toEqual([]));

	it('include the working title, in any case', () => {
		const working = 'Puck release under a moving target';
		expect(findTellingWords(`Re: PUCK RELEASE under a moving target`, working)).toEqual([working]);
		expect(findTellingWords('Practising a sliding movement', working)).toEqual([]);
	});
});
