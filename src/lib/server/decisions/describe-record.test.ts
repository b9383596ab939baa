import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { z } from 'zod';
import { DECISION_KINDS, type DecisionKind } from '$scheduler/policies/policy-memory';
import { decideNextBlock } from '$scheduler/policies/decide';
import {
	decisionRecordSchema,
	type DecisionInputsInput,
	type DecisionRecord
} from '$scheduler/policies/decision-record';
import { describeKind, hasBlockToRun } from '$lib/decisions/kind-words';
import { sha256Hex } from '$lib/server/record/canonical-json';
import { describeRecord } from './describe-record';

/** Records as an engine stored them; the kinds they lack are decided here from their inputs. */
const file = new URL('../../../../tests/reference/data/stored-decisions.json', import.meta.url);
const stored = z
	.array(z.string())
	.parse(JSON.parse(readFileSync(file, 'utf8')))
	.map((text) => decisionRecordSchema.parse(JSON.parse(text)));

function findStored(kind: DecisionKind): DecisionRecord {
	const found = stored.find((record) => record.kind === kind);
	if (!found) throw new RangeError(`no stored decision of kind ${kind}`);
	return found;
}

function decide(inputs: DecisionInputsInput): DecisionRecord {
	const versions = { engineVersion: '1', runtimeVersion: 'node', policyHash: null };
	return decideNextBlock({ ...inputs, versions, digest: sha256Hex });
}

const practice = findStored('practice').inputs;
const onLastBlock = { ...practice.state, blocksLeftToday: 1, trialsToday: 0 };
const dayEnd = { at: 'day-end' as const };

/** Each kind by the engine itself: as stored, or by a rule of the protocol or the person's state. */
const made: Partial<Record<DecisionKind, () => DecisionRecord>> = {
	stop: () => decide({ ...practice, state: { ...practice.state, readiness: { pain: 8 } } }),
	rest: () => decide({ ...practice, state: { ...practice.state, readiness: { fatigue: 9 } } }),
	clamp: () =>
		decide({
			...practice,
			state: onLastBlock,
			protocol: {
				...practice.protocol,
				obligations: [{ kind: 'clamp', when: dayEnd, feedback: 'clamped-to-noise' }]
			}
		}),
	transfer: () =>
		decide({
			...practice,
			state: onLastBlock,
			protocol: {
				...practice.protocol,
				obligations: [{ kind: 'transfer', when: dayEnd, targetOffset: 0.2 }]
			}
		}),
	recovery: () => {
		const region = findStored('region');
		const { state } = region.inputs;
		return decide({
			...region.inputs,
			state: {
				...state,
				readiness: { burden: true },
				last: { kind: 'region', trials: state.last?.trials ?? [] },
				memory: region.memory
			}
		});
	},
	wait: () =>
		decide({
			...practice,
			rule: {
				kind: 'yoked',
				block: 1,
				nowHours: 30,
				previousEndHours: 20,
				gapMaxHours: 28,
				master: { code: 'P07', blocks: [{ scoredAtHours: 10, kind: 'practice' }] }
			}
		})
};

const cases = DECISION_KINDS.map(
	(kind) => [kind, (made[kind] ?? (() => findStored(kind)))()] as const
);

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
		const { picture } = describeRecord(findStored('region'));
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
