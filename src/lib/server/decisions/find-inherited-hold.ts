import type { DecisionRecord } from '$scheduler/policies/decision-record';
import { canonicalJson } from '$lib/server/record/canonical-json';
import type { HoldReason } from './find-hold-reasons';
import type { PersonOnRecord } from './load-person';

/**
 * A standing offer repeats an earlier decision number for number: it waits for a person again,
 * for the same reasons, unless that person has let the same block run before.
 */
export function findInheritedHold(person: PersonOnRecord, record: DecisionRecord): HoldReason[] {
	const offered = canonicalJson({ kind: record.kind, parameters: record.parameters });
	const same = person.decisions.filter((found) => {
		const { kind, parameters } = JSON.parse(found.output) as DecisionRecord;
		return canonicalJson({ kind, parameters }) === offered;
	});
	const wasLetRun = same.some((found) => found.settlement?.action === 'use');
	if (wasLetRun) return [];
	return same.at(-1)?.holdReasons ?? [];
}
