import { describe, expect, it } from 'vitest';
import { createPatternContent } from '../../../tests/support/full-protocol';
import { listLosses, readExport } from './exported-protocol';
import { createPatternDraft, patternNames } from './patterns';
import { readContent } from './read-content';
import { writeDraft } from './write-draft';

const content = createPatternContent();
const exported = {
	kind: 'ovalry-protocol',
	kindVersion: 1,
	title: 'Practising a sliding movement',
	version: 2,
	hash: 'a'.repeat(64),
	frozenAt: '2027-03-01T10:00:00.000Z',
	content
};

describe('an exported protocol', () => {
	it('is read back equal', () => {
		const read = readExport(JSON.stringify(exported));
		expect(read).toEqual({ ok: true, exported });
	});

	it('is refused with each fault by its place', () => {
		expect(readExport('{')).toEqual({ ok: false, reason: 'not-json' });
		const wrong = { ...exported, content: { ...content, readyLeadHours: 'soon' } };
		const read = readExport(JSON.stringify(wrong));
		expect(read).toMatchObject({ ok: false, reason: 'not-a-protocol' });
		expect(!read.ok && 'faults' in read && read.faults[0]).toMatch(/^content\.readyLeadHours: /);
	});

	it.each(patternNames)('of the pattern %s gives an equal text from its draft', (name) => {
		const draft = createPatternDraft(name);
		Object.assign(draft.comparison, { effectD: 0.8, effectSource: 'pilot', peoplePerArm: 30 });
		const first = readContent(draft);
		if (!first.ok) return expect(name).toMatch(/single-visit/);
		const again = writeDraft(first.content, createPatternDraft('blank'));
		const back = again && readContent(again);
		expect(back).toEqual({ ok: true, content: first.content });
		expect(back?.ok && listLosses(first.content, back.content)).toEqual([]);
	});
});
