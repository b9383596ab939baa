import type { EVENT_STRATEGIES, INTERCURRENT_EVENTS } from '$scheduler/protocol/analysis-plan';

export type IntercurrentEvent = (typeof INTERCURRENT_EVENTS)[number];
export type EventStrategy = (typeof EVENT_STRATEGIES)[number];

/** Events after allocation that the record recognises, in plain words. */
export const eventWords: Readonly<Record<IntercurrentEvent, { label: string; when: string }>> = {
	'missed-practice-day': {
		label: 'A practice day is missed',
		when: 'a booked practice visit to which somebody did not come'
	},
	'withdrawal-from-practice': {
		label: 'Somebody stops practising',
		when: 'more practice days missed than the missed-day rule allows'
	},
	'withdrawal-from-study': {
		label: 'Somebody leaves the study',
		when: 'withdrawn, with the visits to come cancelled'
	},
	'adverse-event-pause': {
		label: 'A person is paused',
		when: 'an operator, monitor or coordinator stops one person'
	},
	'fallback-block': {
		label: 'A fallback block runs',
		when: 'a held decision was not settled in time'
	},
	'rule-overridden': {
		label: 'A decision is overridden',
		when: 'the approver changed the block or gave plain practice'
	},
	'rig-failure': {
		label: 'A rig fails',
		when: 'a visit was attended, but no block of it came in whole'
	}
};

/** Strategies of the ICH E9(R1) addendum, with what each means here. */
export const strategyWords: Readonly<Record<EventStrategy, { label: string; detail: string }>> = {
	'treatment-policy': { label: 'treatment policy', detail: 'counts as it happened' },
	hypothetical: { label: 'hypothetical', detail: 'as if it had not happened' },
	composite: { label: 'composite', detail: 'is itself part of the outcome' },
	'while-on-treatment': { label: 'while on treatment', detail: 'what was measured before it' },
	'principal-stratum': {
		label: 'principal stratum',
		detail: 'those to whom it would not happen in any arm'
	}
};
