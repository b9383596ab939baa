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
	/** Share of own trials that the region catches, and how far the target would move in the end. */
	catchShare?: number | null;
	moveBy?: number | null;
};

type Rails = ProtocolContent['guardRails'];
type Limits = Pick<ProtocolContent['limits'], 'shiftMax' | 'penaltyShareMax'>;

/**
 * Why a decision may not act by itself; empty when it is inside the guard rails. Kinds without
 * trials of their own (rest, stop, hold, wait) always wait for a person.
 */
export function findHoldReasons(choice: Choice, rails: Rails, limits: Limits = {}): HoldReason[] {
	if (!hasBlockToRun(choice.kind)) return [{ code: choice.code, values: {} }];
	const beyond = findBeyondLimits(choice, limits);
	return choice.kind === 'region' ? [...findBeyondRails(choice, rails), ...beyond] : beyond;
}

/** A block that a limit of the protocol forbids can never be issued: somebody must choose another. */
function findBeyondLimits({ catchShare, moveBy }: Choice, limits: Limits): HoldReason[] {
	const { shiftMax = Number.POSITIVE_INFINITY, penaltyShareMax = 1 } = limits;
	const [share, move] = [catchShare ?? 0, Math.abs(moveBy ?? 0)];
	return [
		...(share > penaltyShareMax
			? [{ code: 'PENALTY-OVER-LIMIT', values: { share, most: penaltyShareMax } }]
			: []),
		...(move > shiftMax ? [{ code: 'SHIFT-OVER-LIMIT', values: { move, most: shiftMax } }] : [])
	];
}

function findBeyondRails(choice: Choice, rails: Rails): HoldReason[] {
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
