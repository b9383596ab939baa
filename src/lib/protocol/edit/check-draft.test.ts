import { describe, expect, it } from 'vitest';
import { createPatternDraft, patternNames } from '../patterns';
import { checkDraft } from './check-draft';

describe('checkDraft', () => {
	it.each(patternNames)('finds nothing in the pattern %s', (name) => {
		expect(checkDraft(createPatternDraft(name))).toEqual([]);
	});
});
