import { describe, expect, it } from 'vitest';
import { listDifferences } from './list-differences';
import { createPatternDraft } from './patterns';
import type { ProtocolDraft } from './protocol-draft';
import { readContent } from './read-content';
import { contentOf } from './read-content.test-data';
import { writeDraft } from './write-draft';

function finishedDraft(): ProtocolDraft {
	const draft = createPatternDraft('two-arms');
	Object.assign(draft.comparison, { effectD: 0.8, effectSource: 'pilot', peoplePerArm: 30 });
	return draft;
}

describe('readContent', () => {
	it('numbers visits and blocks and gives the first visit no gap', () => {
		const { visits } = contentOf(finishedDraft());
		expect(visits.map(({ number }) => number)).toEqual([1, 2, 3, 4, 5, 6, 7, 8]);
		expect(visits[0]?.gapBefore).toBeNull();
		expect(visits[7]?.gapBefore).toEqual({
			minHours: 144,
			targetHours: 168,
			maxHours: 192,
			nightsBetween: 6
		});
		expect(visits[1]?.blocks.map(({ number }) => number)).toEqual([1, 2, 3, 4]);
	});

	it('writes the whole policy out, with one length for every kind of block', () => {
		const draft = finishedDraft();
		draft.visits.forEach(({ blocks }) => blocks.forEach((block) => (block.trials = 48)));
		const { policy } = contentOf(draft);
		const lengths = ['block', 'probe', 'washout', 'retention', 'recovery'];
		expect(lengths.map((kind) => policy[`${kind}Trials`])).toEqual([48, 48, 48, 48, 48]);
		expect(policy.aims).toEqual({
			region: { share: 0.5, escapes: 3 },
			shift: { share: 0.5, goal: 3 }
		});
	});

	it('leaves out an aim that is off', () => {
		const draft = finishedDraft();
		draft.aims.shift.isOn = false;
		expect(contentOf(draft).policy.aims).toEqual({ region: { share: 0.5, escapes: 3 } });
	});

	it('has no policy and no comparison for one visit of one arm', () => {
		const content = contentOf(createPatternDraft('blank'));
		expect(content.policy).toEqual({});
		expect(content.comparison).toBeNull();
	});

	it('names what cannot be read when a number is missing', () => {
		const draft = finishedDraft();
		draft.readyLeadHours = null;
		const read = readContent(draft);
		expect(read.ok ? [] : read.faults.map(({ field }) => field)).toEqual(['readyLeadHours']);
	});
});

describe('writeDraft', () => {
	it('gives back a draft that freezes to the same content', () => {
		const content = contentOf(finishedDraft());
		const draft = writeDraft(content, createPatternDraft('blank'));
		expect(contentOf(draft)).toEqual(content);
	});

	it('keeps settings of the policy that have no field of their own', () => {
		const draft = finishedDraft();
		draft.otherPolicy = { place: { coverMax: 0.4 }, settle: { margin: 0.3 } };
		const content = contentOf(draft);
		const again = writeDraft(content, createPatternDraft('blank'));
		expect(contentOf(again)).toEqual(content);
		expect(content.policy).toMatchObject({ place: { coverMax: 0.4 }, settle: { margin: 0.3 } });
	});
});

describe('listDifferences', () => {
	it('finds none between equal versions', () => {
		const content = contentOf(finishedDraft());
		expect(listDifferences(content, content, { withRule: true })).toEqual([]);
	});

	it('tells a longer gap, another aim and a new visit in plain words', () => {
		const before = contentOf(finishedDraft());
		const draft = finishedDraft();
		Object.assign(draft.visits[2]?.gapBefore ?? {}, { maxHours: 30 });
		draft.aims.region.escapes = 4;
		const after = contentOf(draft);
		const rule = listDifferences(before, after, { withRule: true });
		expect(rule.map(({ place }) => place)).toEqual([
			'Visits, Day 2',
			'Aims of adaptive blocks, Penalized regions'
		]);
		expect(rule[0]?.before).toContain('24 h after the one before (20 to 28)');
		expect(rule[0]?.after).toContain('24 h after the one before (20 to 30)');
		const blind = listDifferences(before, after, { withRule: false });
		expect(blind.map(({ place }) => place)).toEqual(['Visits, Day 2']);
	});
});
