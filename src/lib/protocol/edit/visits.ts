import { blockDraftSchema, type GapDraft, type VisitDraft } from '../draft-parts';
import type { ProtocolDraft } from '../protocol-draft';
import { changeVisitAt, mostVisits } from './block-lists';

/** What can be done with visits. Each gives another draft and leaves the old one as it is. */

const dailyGap: GapDraft = { minHours: 20, targetHours: 24, maxHours: 28, nightsBetween: 1 };

/** A practice visit behind the visit at `after`, a day later, with one block. */
export function addVisit(draft: ProtocolDraft, after: number): ProtocolDraft {
	if (draft.visits.length >= mostVisits) return draft;
	const days = draft.visits.filter(({ kind }) => kind === 'practice').length;
	const isAdaptive = draft.arms.some(({ rule }) => rule === 'adaptive');
	const visit: VisitDraft = {
		...{ label: `Day ${days + 1}`, kind: 'practice', minutes: 60 },
		...{ setupMinutes: 15, cleanupMinutes: 10, gapBefore: { ...dailyGap } },
		blocks: [blockDraftSchema.parse({ purpose: isAdaptive ? 'adaptive' : 'practice', trials: 60 })],
		armBlocks: {}
	};
	return { ...draft, visits: draft.visits.toSpliced(after + 1, 0, visit) };
}

/** The same visit once more behind itself, with its gap and every arm's blocks. */
export function copyVisit(draft: ProtocolDraft, index: number): ProtocolDraft {
	const visit = draft.visits[index];
	if (!visit || draft.visits.length >= mostVisits) return draft;
	return pasteVisit(draft, visit, index);
}

/** A visit that was copied, behind the visit at `after`. A first visit has no gap to bring: a day. */
export function pasteVisit(draft: ProtocolDraft, visit: VisitDraft, after: number): ProtocolDraft {
	if (draft.visits.length >= mostVisits) return draft;
	const copy = { ...visit, label: nextLabel(visit.label, draft.visits) };
	return { ...draft, visits: draft.visits.toSpliced(after + 1, 0, copy) };
}

export function moveVisit(draft: ProtocolDraft, index: number, by: number): ProtocolDraft {
	const visit = draft.visits[index];
	const to = index + by;
	if (!visit || to < 0 || to >= draft.visits.length || by === 0) return draft;
	return { ...draft, visits: draft.visits.toSpliced(index, 1).toSpliced(to, 0, visit) };
}

export function removeVisit(draft: ProtocolDraft, index: number): ProtocolDraft {
	if (!draft.visits[index] || draft.visits.length < 2) return draft;
	return { ...draft, visits: draft.visits.toSpliced(index, 1) };
}

export function changeVisit(
	draft: ProtocolDraft,
	index: number,
	change: Partial<Omit<VisitDraft, 'blocks' | 'armBlocks' | 'gapBefore'>>
): ProtocolDraft {
	return changeVisitAt(draft, index, (visit) => ({ ...visit, ...change }));
}

export function changeGap(
	draft: ProtocolDraft,
	index: number,
	change: Partial<GapDraft>
): ProtocolDraft {
	return changeVisitAt(draft, index, (visit) => ({
		...visit,
		gapBefore: { ...visit.gapBefore, ...change }
	}));
}

/** 'Day 3' is followed by 'Day 4', or by the first number that no visit has. */
function nextLabel(label: string, visits: readonly VisitDraft[]): string {
	const taken = new Set(visits.map((visit) => visit.label));
	const stem = label.replace(/\d+$/, '');
	if (stem === label) return label;
	let number = Number(label.slice(stem.length)) + 1;
	while (taken.has(`${stem}${number}`)) number += 1;
	return `${stem}${number}`.slice(0, 40);
}
