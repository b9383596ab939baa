import { describe, expect, it } from 'vitest';
import { INTERCURRENT_EVENTS } from '$scheduler/protocol/analysis-plan';
import { createPuckProtocol } from '../../../../tests/support/puck-protocol';
import { tagIntercurrent, type PersonEvent } from './tag-intercurrent';

const { visits } = createPuckProtocol();
const practice = visits.filter(({ kind }) => kind === 'practice').map(({ number }) => number);
const missedDay = { rule: 'make-up' as const, withinHours: 48, mostMissed: 0 };
const [day = 0] = practice;

const event = (kind: string, body: PersonEvent['body'] = {}): PersonEvent => ({ kind, body });
const tag = (events: readonly PersonEvent[], without: readonly number[] = []) =>
	tagIntercurrent(events, { visits, missedDay, visitsWithoutData: new Set(without) });

describe('tags of the record', () => {
	it('know every event that an estimand may name', () => {
		const events = [
			event('visit-missed', { visitNumber: day }),
			event('participant-paused'),
			event('decision-fallback'),
			event('decision-settled', { action: 'change' }),
			event('visit-attended', { visitNumber: day }),
			event('person-withdrawn')
		];
		const tags = tag(events, [day]);
		expect(new Set(tags.flat())).toEqual(new Set(INTERCURRENT_EVENTS));
		expect(tags[0]).toEqual(['missed-practice-day', 'withdrawal-from-practice']);
	});

	it('leave alone what an estimand does not ask about', () => {
		const events = [
			event('visit-missed', { visitNumber: 1 }),
			event('decision-settled', { action: 'use' }),
			event('visit-attended', { visitNumber: day }),
			event('decision-made')
		];
		expect(tag(events).flat()).toEqual([]);
	});

	it('take back a missed day that was attended after all', () => {
		const events = [
			event('visit-missed', { visitNumber: day }),
			event('visit-attended', { visitNumber: day }),
			event('visit-missed', { visitNumber: day })
		];
		const tagged = tagIntercurrent(events, {
			...{ visits, visitsWithoutData: new Set<number>() },
			missedDay: { ...missedDay, mostMissed: 1 }
		});
		expect(tagged.flat()).toEqual(['missed-practice-day', 'missed-practice-day']);
	});
});
