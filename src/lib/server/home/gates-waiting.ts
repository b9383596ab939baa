import { findMissingGates, type GateCode } from '$lib/server/studies/load-gates';
import type { WaitingItem, WaitingSource } from './waiting';

const acts: Record<GateCode, { label: string; path: string } | null> = {
	'not-frozen': { label: 'Open the protocol', path: 'protocol' },
	'not-signed': { label: 'Look at the power', path: 'power' },
	'no-approval': { label: 'Record the approval', path: 'protocol' },
	'approval-expired': { label: 'Record its renewal', path: 'protocol' },
	'not-sealed': { label: 'Seal the allocation', path: 'allocation' },
	paused: { label: 'Look at the pause', path: 'today' },
	closed: null
};

/** The steps before enrolment opens that are this person's. */
export const findGatesWaiting: WaitingSource = async (db, clock, { studyId, roles }) => {
	if (roles.length === 0) return [];
	const missing = await findMissingGates(db, clock, studyId);
	return missing.flatMap(({ code, text, whose }): WaitingItem[] => {
		const act = acts[code];
		if (!act || !roles.includes(whose)) return [];
		return [
			{
				title: text,
				detail: 'Until then nobody is enrolled, booked or invited, and no block is issued.',
				dueAtMs: null,
				act: { label: act.label, href: `/studies/${studyId}/${act.path}` }
			}
		];
	});
};
