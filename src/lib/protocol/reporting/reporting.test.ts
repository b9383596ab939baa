import { describe, expect, it } from 'vitest';
import { createFullContent, createPatternContent } from '../../../../tests/support/full-protocol';
import type { DocumentFacts } from './document-facts';
import { listPackParts } from './ethics-pack';
import { fillChecklists } from './fill-checklists';
import { writeRegistryText } from './registry-text';

const facts: DocumentFacts = {
	content: createFullContent(),
	withRule: true,
	number: 3,
	hash: 'a'.repeat(64),
	frozenOn: '2027-03-01',
	frozenBy: 'Ivy Invented',
	reason: 'First version.',
	workingTitle: 'Puck release under a moving target',
	publicTitle: 'Practising a sliding movement',
	labName: 'Tidewater Movement Lab',
	phone: '+351 555 0101',
	approvals: [],
	signedOff: null,
	team: [{ role: 'Monitor', name: 'Mona Madeup' }],
	isSealed: false,
	versionCount: 3,
	base: '/studies/x',
	shut: []
};
const bare = { ...facts, content: createPatternContent() };

describe('the checklists', () => {
	it('give each item a value with its place, or say what is missing', () => {
		for (const { items } of [...fillChecklists(facts), ...fillChecklists(bare)]) {
			for (const { answer } of items) {
				if (answer.state === 'said') {
					expect(answer.text).not.toBe('');
					expect(answer.href).toMatch(/^\/studies\/x\//);
				} else expect('missing' in answer && answer.missing).toMatch(/\.$/);
			}
		}
	});

	it('have one entry for each number', () => {
		for (const { items } of fillChecklists(facts)) {
			const numbers = items.map(({ number }) => number);
			expect(new Set(numbers).size).toBe(numbers.length);
		}
	});

	it('count an item as a gap only while it is one', () => {
		const gapsOf = (given: DocumentFacts) =>
			fillChecklists(given).flatMap(({ items }) =>
				items.flatMap(({ number, answer }) => (answer.state === 'gap' ? [number] : []))
			);
		expect(gapsOf(bare)).toContain('27a');
		expect(gapsOf(facts)).not.toContain('27a');
		const approval = {
			board: 'Board',
			reference: 'E-1',
			from: '',
			to: '2028-01-01',
			state: 'valid'
		};
		expect(gapsOf(facts)).toContain('30');
		expect(gapsOf({ ...facts, approvals: [approval] })).not.toContain('30');
	});

	it('link to no page that the reader does not open', () => {
		const shut = { ...facts, shut: ['/team'] };
		const links = fillChecklists(shut).flatMap(({ items }) =>
			items.flatMap(({ answer }) => (answer.state === 'said' ? [answer.href] : []))
		);
		expect(links).toContain(null);
		expect(links.some((href) => href?.includes('/team'))).toBe(false);
	});

	it('say nothing of the rule to who may not read it', () => {
		const blinded = { ...facts, withRule: false };
		const texts = JSON.stringify([fillChecklists(blinded), listPackParts(blinded)]);
		expect(texts).toContain('left out here for your role');
		expect(texts).not.toMatch(/aims: |held for the approver over|largest dose of any/);
	});
});

describe('the registry text', () => {
	it('holds every field, marks gaps, and lists them again', () => {
		const { text, gaps } = writeRegistryText(facts);
		expect(text).toContain('Public title: Practising a sliding movement\n');
		expect(text).toContain('Sponsor: [to be filled in]');
		expect(gaps).toContain('Sponsor');
		expect(gaps).toContain('Ethics review');
		for (const name of gaps) expect(text).toContain(`${name}: [to be filled in]`);
	});

	it('never gives the working title away', () => {
		expect(writeRegistryText(facts).text).not.toContain(facts.workingTitle);
	});
});

describe('the pack for a board', () => {
	it('lists every document and each gap', () => {
		const parts = listPackParts(bare);
		const missing = parts.filter(({ answer }) => answer.state === 'gap').map(({ title }) => title);
		expect(missing).toEqual([
			'Words of the consent text',
			'Pay',
			'Stopping rules',
			'Statistician’s sign-off',
			'Risk file of a powered rig'
		]);
	});
});
