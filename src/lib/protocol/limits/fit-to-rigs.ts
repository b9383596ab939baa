import type { RigLimit } from '../fault';
import type { ProtocolDraft } from '../protocol-draft';
import { findUnsavable } from './find-envelope-faults';

/** A worked pattern with limits that the lab's rigs allow. */
export function fitToRigs(draft: ProtocolDraft, rigs: readonly RigLimit[]): ProtocolDraft {
	if (findUnsavable(draft, rigs).length === 0) return draft;
	const most = (name: 'minutesPerVisit' | 'trialsPerVisit') =>
		Math.min(draft.limits[name] ?? Infinity, Math.max(...rigs.map((rig) => rig[name])));
	const limits = {
		...draft.limits,
		minutesPerVisit: most('minutesPerVisit'),
		trialsPerVisit: most('trialsPerVisit')
	};
	return { ...draft, limits };
}
