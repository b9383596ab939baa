import { describe, expect, it } from 'vitest';
import { glossary } from './glossary';
import { helpForPage, helpTexts } from './page-help';

/** Words that product terms need although they are long. */
const terms = new Set(glossary.flatMap(({ term }) => term.split(/[ -]/)));

const sentencesOf = (text: string) => text.split(/(?<=[.:])\s+/).filter(Boolean);
const wordsOf = (text: string) => text.match(/[\p{L}’'-]+/gu) ?? [];

/** Vowel groups, as the usual formulas count syllables; a mute e at the end is none. */
function countSyllables(word: string): number {
	const plain = word.toLowerCase().replace(/(?:[^l]e|ed|es)$/, '');
	return Math.max(1, plain.match(/[aeiouy]+/g)?.length ?? 1);
}

/** Flesch reading ease (Flesch 1948): over 60 is plain English. */
function readingEase(texts: readonly string[]): number {
	const sentences = texts.flatMap(sentencesOf);
	const words = sentences.flatMap(wordsOf);
	const syllables = words.reduce((sum, word) => sum + countSyllables(word), 0);
	return 206.835 - 1.015 * (words.length / sentences.length) - 84.6 * (syllables / words.length);
}

describe('help and glossary', () => {
	const texts = [...helpTexts, ...glossary.map(({ text }) => text)];

	it('have no sentence of more than 20 words', () => {
		const long = texts.flatMap(sentencesOf).filter((sentence) => wordsOf(sentence).length > 20);
		expect(long).toEqual([]);
	});

	it('use no word of more than 12 letters but terms that are explained', () => {
		const long = texts.flatMap(wordsOf).filter((word) => word.length > 12 && !terms.has(word));
		expect(long).toEqual([]);
	});

	it('read as plain English', () => {
		expect(readingEase(texts)).toBeGreaterThan(60);
	});

	it('would not pass with the prose of a method section', () => {
		const prose =
			'Participants were subsequently randomised utilising computer-generated permuted-block allocation sequences, stratified by institutional characteristics and demographic considerations.';
		expect(readingEase([prose])).toBeLessThan(20);
	});

	it('explain each term once, in the order of the alphabet', () => {
		const names = glossary.map(({ term }) => term);
		expect(names).toEqual([...new Set(names)].toSorted((a, b) => a.localeCompare(b, 'en')));
	});

	it('find the help of the nearest page above', () => {
		const inner = helpForPage('/studies/[studyId]/people/[participantId]/places');
		expect(inner.text).toEqual(helpForPage('/studies/[studyId]/people').text);
		expect(helpForPage('/account').keys).toEqual([
			{ keys: 'Ctrl+K', does: 'find a page or an act' }
		]);
	});
});
