import type { WaitingItem } from '$lib/waiting/waiting-item';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { findBreachCount } from '$lib/server/envelope/load-envelope';

/** Blocks outside the approved envelope, for approver and monitor: how many, never whose. */
export async function listBreachItems(
	db: Queryable,
	grant: Grant<'today:read'>
): Promise<WaitingItem[]> {
	const isApprover = grant.roles.includes('approver');
	if (!isApprover && !grant.roles.includes('monitor')) return [];
	const { count } = await findBreachCount(db, grant.studyId);
	if (count === 0) return [];
	const base = `/studies/${grant.studyId}`;
	return [
		{
			key: `breach ${count}`,
			kind: 'breach',
			participantId: null,
			tone: 'rose',
			title:
				count === 1
					? '1 block lies outside the approved envelope'
					: `${count} blocks lie outside the approved envelope`,
			what: 'Each stored decision is held against the numbers of its version, whatever decided it.',
			ifNothing: 'The study goes on beyond what the board approved. Any member may pause it.',
			byMs: null,
			byText: 'now',
			act: isApprover
				? { label: 'Look at the decisions', href: `${base}/decisions` }
				: { label: 'See the approved numbers', href: `${base}/protocol#envelope` }
		}
	];
}
