import { describe, expect, it } from 'vitest';
import { findLetterType } from './letter-type';

const bytesOf = (text: string) => new TextEncoder().encode(text);

describe('the kind of a letter', () => {
	it('is read from the first bytes of PDF, PNG and JPEG files', () => {
		// PDF 1.7 by ISO 32000-1 7.5.2; PNG signature by ISO/IEC 15948 5.2; JPEG SOI by ITU-T T.81 B.1.1.3.
		expect(findLetterType(bytesOf('%PDF-1.7\n'))).toBe('application/pdf');
		expect(findLetterType(new Uint8Array([137, 80, 78, 71, 13, 10, 26, 10, 0]))).toBe('image/png');
		expect(findLetterType(new Uint8Array([0xff, 0xd8, 0xff, 0xe0, 0]))).toBe('image/jpeg');
	});

	it.each([
		['a page', '<!doctype html><script>'],
		['a drawing with script', '<svg xmlns="http://www.w3.org/2000/svg">'],
		['a PDF behind other bytes', ' %PDF-1.7'],
		['a cut signature', '%PDF'],
		['nothing', '']
	])('is not given to %s', (_, text) => {
		expect(findLetterType(bytesOf(text))).toBeNull();
	});
});
