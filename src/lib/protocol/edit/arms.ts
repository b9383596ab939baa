import type { ArmDraft } from '../draft-parts';
import type { ProtocolDraft } from '../protocol-draft';
import { mostArms, without } from './block-lists';

/** What can be done with arms. Each gives another draft and leaves the old one as it is. */

export function addArm(draft: ProtocolDraft): ProtocolDraft {
	if (draft.arms.length >= mostArms) return draft;
	const arm: ArmDraft = { key: freeKey(draft.arms), name: '', rule: 'fixed', master: null };
	return { ...draft, arms: [...draft.arms, arm] };
}

/** The same arm once more behind itself, with the blocks that are its own. */
export function copyArm(draft: ProtocolDraft, index: number): ProtocolDraft {
	const arm = draft.arms[index];
	if (!arm || draft.arms.length >= mostArms) return draft;
	const key = freeKey(draft.arms);
	const name = arm.name.trim() === '' ? '' : `${arm.name} copy`.slice(0, 60);
	const visits = draft.visits.map((visit) => {
		const own = visit.armBlocks[arm.key];
		return own ? { ...visit, armBlocks: { ...visit.armBlocks, [key]: own } } : visit;
	});
	return { ...draft, visits, arms: draft.arms.toSpliced(index + 1, 0, { ...arm, key, name }) };
}

export function moveArm(draft: ProtocolDraft, index: number, by: number): ProtocolDraft {
	const arm = draft.arms[index];
	const to = index + by;
	if (!arm || to < 0 || to >= draft.arms.length || by === 0) return draft;
	return { ...draft, arms: draft.arms.toSpliced(index, 1).toSpliced(to, 0, arm) };
}

/** Takes an arm out with its own blocks; an arm that followed it follows nobody, and is fixed. */
export function removeArm(draft: ProtocolDraft, index: number): ProtocolDraft {
	const gone = draft.arms[index];
	if (!gone || draft.arms.length < 2) return draft;
	const arms = draft.arms
		.toSpliced(index, 1)
		.map((arm): ArmDraft =>
			arm.master === gone.key ? { ...arm, rule: 'fixed', master: null } : arm
		);
	const visits = draft.visits.map((visit) =>
		visit.armBlocks[gone.key] ? { ...visit, armBlocks: without(visit.armBlocks, gone.key) } : visit
	);
	return { ...draft, arms, visits };
}

/** A yoked arm names the arm it follows; the first adaptive one until another is chosen. */
export function changeArm(
	draft: ProtocolDraft,
	index: number,
	change: Partial<Omit<ArmDraft, 'key'>>
): ProtocolDraft {
	const old = draft.arms[index];
	if (!old) return draft;
	const arm = { ...old, ...change };
	const others = draft.arms.filter(({ key, rule }) => key !== old.key && rule !== 'yoked');
	const master = others.find(({ rule }) => rule === 'adaptive') ?? others[0];
	const followed = arm.rule === 'yoked' ? (arm.master ?? master?.key ?? null) : null;
	return { ...draft, arms: draft.arms.with(index, { ...arm, master: followed }) };
}

function freeKey(arms: readonly ArmDraft[]): string {
	const taken = new Set(arms.map(({ key }) => key));
	let number = arms.length + 1;
	while (taken.has(`arm-${number}`)) number += 1;
	return `arm-${number}`;
}
