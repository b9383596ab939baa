import type { DesignArm, DesignBlock, DesignVisit } from '$scheduler/design/design';
import {
	setAt,
	type DesignOperation,
	type DesignPath,
	type Repair
} from '$scheduler/design/repair';
import { writeClockText } from '../clock-text';
import {
	armDraftSchema,
	blockDraftSchema,
	gapDraftSchema,
	visitDraftSchema,
	type ArmDraft,
	type BlockDraft,
	type VisitDraft
} from '../draft-parts';
import type { ProtocolDraft } from '../protocol-draft';

/** A draft after a repair of the checker; the one that is given stays as it is. */
export function applyRepair(draft: ProtocolDraft, { operations }: Repair): ProtocolDraft {
	return operations.reduce(applyOperation, draft);
}

function applyOperation(draft: ProtocolDraft, operation: DesignOperation): ProtocolDraft {
	switch (operation.kind) {
		case 'set-value':
			return setValue(draft, operation.path, operation.value);
		case 'set-blocks':
			return {
				...draft,
				visits: draft.visits.map((visit, index) =>
					index === operation.visit ? setBlocks(visit, operation) : visit
				)
			};
		case 'insert-visit':
			return {
				...draft,
				visits: draft.visits.toSpliced(operation.at, 0, toVisitDraft(operation.visit))
			};
		case 'add-arm':
			return { ...draft, arms: [...draft.arms, toArmDraft(operation.arm)] };
	}
}

function setBlocks(
	visit: VisitDraft,
	{ arm, blocks }: { arm: string | null; blocks: readonly DesignBlock[] }
): VisitDraft {
	const list = blocks.map(toBlockDraft);
	if (arm === null) return { ...visit, blocks: list };
	return { ...visit, armBlocks: { ...visit.armBlocks, [arm]: list } };
}

/** Design and draft name the same things alike, but for clock times and the policy's own fields. */
function setValue(draft: ProtocolDraft, path: DesignPath, value: unknown): ProtocolDraft {
	const [first, second, ...rest] = path;
	if (first === 'booking' && (second === 'earliestMinute' || second === 'latestMinute')) {
		const name = second === 'earliestMinute' ? 'earliest' : 'latest';
		return { ...draft, booking: { ...draft.booking, [name]: writeClockText(Number(value)) } };
	}
	if (first === 'policy' && (second === 'aims' || second === 'settle')) {
		return setAt(draft, [second, ...rest], value) as ProtocolDraft;
	}
	if (first === 'policy') {
		const inside = second === undefined ? rest : [second, ...rest];
		return setAt(draft, ['otherPolicy', ...inside], value) as ProtocolDraft;
	}
	if (path.at(-1) === 'gapBefore') {
		return setAt(draft, path, gapDraftSchema.parse(value)) as ProtocolDraft;
	}
	return setAt(draft, path, value) as ProtocolDraft;
}

// The schemas drop what a draft does not hold, such as numbers of blocks.

function toBlockDraft(block: DesignBlock): BlockDraft {
	return blockDraftSchema.parse(block);
}

function toArmDraft(arm: DesignArm): ArmDraft {
	return armDraftSchema.parse(arm);
}

function toVisitDraft(visit: DesignVisit): VisitDraft {
	return visitDraftSchema.parse(visit);
}
