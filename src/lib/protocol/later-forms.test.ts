import { describe, expect, it } from 'vitest';
import { EVENT_STRATEGIES, INTERCURRENT_EVENTS } from '$scheduler/protocol/analysis-plan';
import { RELAXABLE_RULES } from '$scheduler/protocol/booking-rules';
import table from '$lib/server/access/visibility.json';
import { eventWords, strategyWords } from './analysis/event-words';
import { relaxableRules } from './booking/relaxable-words';
import { plainBlock } from './empty-parts';
import { findFaults } from './find-faults';
import { createPatternDraft } from './patterns';
import type { ProtocolDraft } from './protocol-draft';
import { listVariantChoices } from './variant-choices';

const blocking = (draft: ProtocolDraft) =>
	findFaults(draft, []).filter(({ level }) => level === 'fault');
const codesOf = (draft: ProtocolDraft) => blocking(draft).map(({ code }) => code);

function changed(change: (draft: ProtocolDraft) => void): ProtocolDraft {
	const draft = createPatternDraft('yoked-region');
	change(draft);
	return draft;
}

describe('words of the forms', () => {
	it('know every exception that the visibility table knows', () => {
		const keys = listVariantChoices([]).map(({ key }) => key);
		expect(keys.sort()).toEqual(Object.keys(table.variants).sort());
	});

	it('keep an exception that an earlier version declared', () => {
		expect(listVariantChoices(['an-old-one']).at(-1)).toMatchObject({ key: 'an-old-one' });
	});

	it('know every rule that may give way, every event and every strategy', () => {
		expect(Object.keys(relaxableRules).sort()).toEqual([...RELAXABLE_RULES].sort());
		expect(Object.keys(eventWords).sort()).toEqual([...INTERCURRENT_EVENTS].sort());
		expect(Object.keys(strategyWords).sort()).toEqual([...EVENT_STRATEGIES].sort());
	});
});

describe('faults of the later forms', () => {
	it('are none in the pattern with a yoked arm', () => {
		expect(codesOf(createPatternDraft('yoked-region'))).toEqual([]);
	});

	const yoked = (draft: ProtocolDraft) => draft.arms.find(({ rule }) => rule === 'yoked');
	it.each<[string, (draft: ProtocolDraft) => void]>([
		['no-master', (draft) => Object.assign(yoked(draft) ?? {}, { master: null })],
		['no-master', (draft) => Object.assign(yoked(draft) ?? {}, { master: 'gone' })],
		['master-itself', (draft) => Object.assign(yoked(draft) ?? {}, { master: yoked(draft)?.key })],
		['master-not-adaptive', (draft) => Object.assign(yoked(draft) ?? {}, { master: 'fixed' })],
		['yoked-baseline-inside', ({ visits }) => visits[0]?.blocks.push(plainBlock('practice', 60))],
		['number-missing', ({ yoking }) => (yoking.leadHours = null)],
		['number-outside', (draft) => Object.assign(draft.missedDay ?? {}, { mostMissed: 21 })],
		['number-outside', (draft) => (draft.relaxation = [{ rule: 'same-time', by: 0, price: 1 }])],
		[
			'step-no-further',
			(draft) =>
				(draft.relaxation = [
					{ rule: 'same-time', by: 60, price: 1 },
					{ rule: 'same-time', by: 60, price: 2 }
				])
		],
		['strategy-missing', ({ analysis }) => analysis.estimand.events.pop()],
		['primary-outcome', ({ analysis }) => (analysis.outcomes = [])],
		['text-missing', ({ analysis }) => (analysis.estimand.population = ' ')],
		['look-outside', ({ analysis }) => (analysis.interimLooks = [0.5, 1])],
		['look-order', ({ analysis }) => (analysis.interimLooks = [0.5, 0.5])],
		['version-twice', ({ instructions }) => instructions.push({ version: '1', text: 'Again.' })],
		['instruction-unknown', ({ instructions }) => instructions.splice(0)]
	])('name %s', (code, change) => {
		expect(codesOf(changed(change))).toContain(code);
		const fault = blocking(changed(change)).find((found) => found.code === code);
		expect(fault?.field).not.toBe('');
		expect(fault?.remedy).toMatch(/\.$/);
	});

	it('ask for no strategy for what cannot happen in the design', () => {
		const draft = changed(({ arms, visits, analysis }) => {
			arms.forEach((arm) => Object.assign(arm, { rule: 'fixed', master: null }));
			for (const { blocks } of visits) {
				blocks.forEach((block) => block.purpose === 'adaptive' && (block.purpose = 'practice'));
			}
			const decided = ['fallback-block', 'rule-overridden'];
			analysis.estimand.events = analysis.estimand.events.filter(
				({ event }) => !decided.includes(event)
			);
		});
		expect(codesOf(draft)).not.toContain('strategy-missing');
	});

	it('are none while nothing of the analysis is written', () => {
		const draft = createPatternDraft('two-arms');
		const fields = blocking(draft).map(({ field }) => field);
		expect(fields.filter((field) => field.startsWith('analysis'))).toEqual([]);
	});
});
