import { checkNumber, faultAt, type Fault, type RigLimit } from '../fault';
import type { ProtocolDraft } from '../protocol-draft';
import { findWidest, listLimits, type LimitRow } from './list-limits';

const place = 'Limits';

/** Limits that make no sense, or that lie above what the lab's rigs allow. */
export function findEnvelopeFaults(draft: ProtocolDraft, rigs: readonly RigLimit[]): Fault[] {
	const used = usesRigs(draft) ? rigs : [];
	return listLimits(draft, used).flatMap((row) => [
		...(row.value === null && !row.isNeeded ? [] : checkRange(row)),
		...checkRigs(row)
	]);
}

/** The same, as far as it keeps a draft from being saved at all: a limit that is missing may wait. */
export function findUnsavable(draft: ProtocolDraft, rigs: readonly RigLimit[]): Fault[] {
	return findEnvelopeFaults(draft, rigs).filter(({ code }) => code !== 'number-missing');
}

function checkRange({ label, unit, ...row }: LimitRow): Fault[] {
	return checkNumber({ ...row, place, name: label, ...(unit ? { unit } : {}) });
}

/** A limit that only some rigs keep is let pass: a block is held against the limits of its own rig. */
function checkRigs(row: LimitRow): Fault[] {
	const { label, unit, field, value } = row;
	const widest = findWidest(row);
	if (value === null || !widest || value <= widest.allowed) return [];
	const said = row.rigs.map(({ name, allowed }) => `${name} ${allowed ?? 0} ${unit}`.trim());
	const text = `${label}: ${value} ${unit} may be asked for, but the rigs allow: ${said.join(', ')}.`;
	const remedy = `Enter at most ${widest.allowed} ${unit}, what ${widest.name} allows.`;
	return [faultAt('over-rig-limit', { place, field }, text, remedy)];
}

/** Whether anything is issued to a rig; a study of recorded data asks no rig for anything. */
function usesRigs({ visits }: ProtocolDraft): boolean {
	const recorded = new Set(['baseline', 'retention', 'rest']);
	return visits.some(({ blocks, armBlocks }) =>
		[blocks, ...Object.values(armBlocks)].some((list) =>
			list.some(({ purpose }) => !recorded.has(purpose))
		)
	);
}
