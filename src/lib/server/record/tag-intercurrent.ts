import type { INTERCURRENT_EVENTS } from '$scheduler/protocol/analysis-plan';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';

type IntercurrentEvent = (typeof INTERCURRENT_EVENTS)[number];

/** One event of the record about a person, in the order of the record. */
export type PersonEvent = { kind: string; body: Readonly<Record<string, unknown>> };

export type TagContext = Pick<ProtocolContent, 'visits' | 'missedDay'> & {
	/** Attended visits of which no block came in. */
	visitsWithoutData: ReadonlySet<number>;
};

/** The events of one person that an estimand must deal with; an event may be none, or two of them. */
export function tagIntercurrent(
	events: readonly PersonEvent[],
	{ visits, missedDay, visitsWithoutData }: TagContext
): IntercurrentEvent[][] {
	const practice = new Set(
		visits.filter(({ kind }) => kind === 'practice').map(({ number }) => number)
	);
	const missed = new Set<number>();
	return events.map(({ kind, body }) => {
		const visitNumber = typeof body.visitNumber === 'number' ? body.visitNumber : 0;
		if (kind === 'visit-attended') {
			missed.delete(visitNumber);
			return visitsWithoutData.has(visitNumber) ? ['rig-failure'] : [];
		}
		if (kind !== 'visit-missed') return tagAlone(kind, body);
		if (!practice.has(visitNumber)) return [];
		missed.add(visitNumber);
		const isTooMany = missedDay !== undefined && missed.size === missedDay.mostMissed + 1;
		return ['missed-practice-day', ...(isTooMany ? (['withdrawal-from-practice'] as const) : [])];
	});
}

/** Events that say all by themselves. */
function tagAlone(kind: string, body: PersonEvent['body']): IntercurrentEvent[] {
	if (kind === 'person-withdrawn') return ['withdrawal-from-study'];
	if (kind === 'participant-paused') return ['adverse-event-pause'];
	if (kind === 'decision-fallback') return ['fallback-block'];
	if (kind === 'decision-settled' && body.action !== 'use') return ['rule-overridden'];
	return [];
}
