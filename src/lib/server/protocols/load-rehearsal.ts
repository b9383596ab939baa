import { findFaults } from '$lib/protocol/find-faults';
import { readContent } from '$lib/protocol/read-content';
import type { Grant } from '$lib/server/access/require-permission';
import { loadLabCalendar } from '$lib/server/bookings/load-lab-calendar';
import type { Queryable } from '$lib/server/db/client';
import { hashPolicy } from '$lib/server/decisions/versions';
import type { DryLab } from '$scheduler/design/dry-run/dry-settings';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { loadDraftContent } from './draft-content';
import { findDraftRow, findFrozenVersions } from './find-versions';
import { loadRigLimits } from './load-draft';
import { mayReadRule } from './may-read-rule';

/** What can be tried before it is frozen: the draft, or the newest version where none is written. */
export type Rehearsal = {
	lab: DryLab;
	rigs: Awaited<ReturnType<typeof loadRigLimits>>;
} & (
	| { ok: true; number: number; isFrozen: boolean; content: ProtocolContent; ruleHash: string }
	| { ok: false; reason: 'nothing-written' }
	/** The draft cannot be read as a protocol yet. */
	| { ok: false; reason: 'faults'; number: number; faults: string[] }
);

/**
 * The protocol that would be frozen now, with the hash under which its rule would be logged; the lab
 * without anybody's name. Nothing of it belongs to a person.
 */
export async function loadRehearsal(
	db: Queryable,
	grant: Grant<'protocol:rehearse'>
): Promise<Rehearsal> {
	const lab = await loadDryLab(db, grant.labId);
	const rigs = await loadRigLimits(db, grant.labId);
	const draft = grant.roles.includes('investigator') ? await findDraftRow(db, grant.studyId) : null;
	if (!draft) {
		const [newest] = await findFrozenVersions(db, grant.studyId);
		if (!newest || !mayReadRule(grant)) return { lab, rigs, ok: false, reason: 'nothing-written' };
		const { number, content } = newest;
		return { lab, rigs, ok: true, number, isFrozen: true, content, ruleHash: hashPolicy(content) };
	}
	const { number } = draft;
	const written = loadDraftContent(draft.content);
	const read = readContent(written);
	if (!read.ok) {
		const found = findFaults(written, rigs).filter(({ level }) => level === 'fault');
		const faults = (found.length > 0 ? found : read.faults).map(
			({ place, text }) => `${place}: ${text}`
		);
		return { lab, rigs, ok: false, reason: 'faults', number, faults };
	}
	const { content } = read;
	return { lab, rigs, ok: true, number, isFrozen: false, content, ruleHash: hashPolicy(content) };
}

/** Rigs, rooms and staff with their hours; staff by number, because nobody's name is needed. */
async function loadDryLab(db: Queryable, labId: string): Promise<DryLab> {
	const { calendar } = await loadLabCalendar(db, { labId });
	const isOpen = ({ hours }: { hours: readonly unknown[] }) => hours.length > 0;
	return {
		zone: calendar.zone,
		holidays: calendar.holidays,
		rigs: calendar.rigs.filter(isOpen).map(({ id, roomId, hours }) => ({ id, roomId, hours })),
		staff: calendar.staff
			.filter(isOpen)
			.map(({ hours }, index) => ({ id: `staff-${index + 1}`, hours }))
	};
}
