import type { DecisionKind } from '$scheduler/policies/policy-memory';
import { hasBlockToRun } from '$lib/decisions/kind-words';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';

export type HoldReason = { code: string; values: Record<string, number> };

type Choice = {
	kind: DecisionKind;
	code: string;
	/** Share of the traced zero-error line inside the region, where one was placed. */
	coverShare: number | null;
	/** Distance of the nearest way out, in own standard deviations along the line. */
	reachSd: number | null;
};

/**
 * Why a decision may not act by itself; empty when it is inside the guard rails. Kinds without
 * trials of their own (rest, stop, hold, wait) always wait for a person.
 */
export function findHoldReasons(
	choice: Choice,
	rails: ProtocolContent['guardRails']
): HoldReason[] {
	if (!hasBlockToRun(choice.kind)) return [{ code: choice.code, values: {} }];
	if (choice.kind !== 'region') return [];
	const reasons: HoldReason[] = [];
	if (choice.coverShare !== null && choice.coverShare > rails.automaticCoverMax) {
		const values = { cover: choice.coverShare, automatic: rails.automaticCoverMax };
		reasons.push({ code: 'COVER-HIGH', values });
	}
	if (choice.reachSd !== null && choice.reachSd > rails.automaticReachSdMax) {
		const values = { reachSd: choice.reachSd, automatic: rails.automaticReachSdMax };
		reasons.push({ code: 'REACH-FAR', values });
	}
	return reasons;
}
