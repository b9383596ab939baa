import { describe, expect, it } from 'vitest';
import { DECISION_KINDS, type DecisionKind } from '$scheduler/policies/policy-memory';
import type { DecisionRecord } from '$scheduler/policies/decision-record';
import { describeKind, hasBlockToRun } from '$lib/decisions/kind-words';
import { makeDecision } from '../../../../tests/support/make-decision';
import { describeRecord } from './describe-record';

const cases = DECISION_KINDS.map((kind) => [kind, makeDecision(kind)] as const);

describe('the card of a decision', () => {
	it.each(cases)('of kind %s says everything in plain words', (kind, record) => {
		const card = describeRecord(record);
		expect(record.kind).toBe(kind);
		expect(card.kindWords).toBe(describeKind(kind));
		expect(card.explained.reasons.length).toBeGreaterThan(0);
		expect(card.explained.ladder.at(-1)?.code).toBe(record.reasons[0]?.code);
		const sentences = [
			...card.explained.reasons.map(({ text }) => text),
			...card.explained.ladder.flatMap(({ asks, text }) => [asks, text]),
			...card.explained.refused.map(({ text }) => text),
			...card.explained.shares.map(({ text }) => text),
			...card.parameters.flatMap(({ term, text }) => [term, text])
		];
		for (const sentence of sentences) {
			expect(sentence).not.toBe('');
			expect(sentence).not.toMatch(/The engine answered|unknown number|undefined|NaN/);
			// A code is written in capitals with a hyphen; none may stand in a sentence.
			expect(sentence).not.toMatch(/\b[A-Z]{2,}-[A-Z-]{2,}\b/);
		}
	});

	it.each(cases.filter(([kind]) => hasBlockToRun(kind)))(
		'of kind %s names its length',
		(_, record) => {
			const { parameters } = describeRecord(record);
			const length = parameters.find(({ term }) => term === 'Length');
			expect(length?.text).toBe(`${record.parameters.trials} trials`);
		}
	);

	it('says what is shown in an error clamp and where a transfer’s target lies', () => {
		const clamp = describeRecord(decideOf('clamp')).parameters.map(({ text }) => text);
		expect(clamp).toContain('an error is shown that does not depend on what the person does');
		const transfer = describeRecord(decideOf('transfer')).parameters;
		expect(transfer).toContainEqual({ term: 'Other target', text: '0.2 m beside the usual one' });
		expect(transfer).toContainEqual({ term: 'Feedback', text: 'no result is shown' });
	});

	it('draws trials in the plane of a task of two variables', () => {
		const { picture } = describeRecord(makeDecision('region'));
		expect(picture.kind).toBe('plane');
		if (picture.kind !== 'plane') return;
		const kinds = picture.data.ellipses.map(({ kind }) => kind);
		expect(kinds).toEqual(['own', 'region', 'expected']);
		expect(picture.data.arrow).not.toBeNull();
	});
});

function decideOf(kind: DecisionKind): DecisionRecord {
	const found = cases.find(([name]) => name === kind);
	if (!found) throw new RangeError(`no case of kind ${kind}`);
	return found[1];
}
