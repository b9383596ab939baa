import { addDaysToDate } from '$lib/time/add-local-days';
import { startOfLocalDate } from '$lib/time/start-of-local-day';
import { localDateOf } from '$lib/time/wall-clock';
import type { WaitingItem } from '$lib/waiting/waiting-item';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { approvalWarnings, findApprovalEnd } from '$lib/server/ethics/find-approval-end';
import { loadRunningVersion } from '$lib/server/studies/load-gates';
import { loadLabZone } from './chain-items';

/** The end of the running version's approval, sixty, thirty and seven days before, for who must act. */
export async function listApprovalItems(
	db: Queryable,
	clock: Clock,
	grant: Grant<'today:read'>
): Promise<WaitingItem[]> {
	const isTheirs = (['investigator', 'coordinator'] as const).some((role) =>
		grant.roles.includes(role)
	);
	const running = isTheirs ? await loadRunningVersion(db, clock, grant.studyId) : null;
	if (!running) return [];
	const zone = await loadLabZone(db, grant.labId);
	const today = localDateOf(clock.now(), zone);
	const { studyId } = grant;
	const end = await findApprovalEnd(db, { studyId, hash: running.hash, today });
	if (!end) return [];
	const isMine = grant.roles.includes('investigator');
	return [
		{
			key: `approval-ends ${end.date}`,
			kind: 'approval-ends',
			participantId: null,
			tone:
				end.days <= approvalWarnings.last
					? 'rose'
					: end.days <= approvalWarnings.second
						? 'amber'
						: 'plain',
			title: `The ethics approval ends ${tellDays(end.days)}`,
			what: `Of version ${running.number}, on ${end.date}. ${isMine ? 'To renew it is your step.' : 'To renew it is the step of the investigator.'}`,
			ifNothing:
				'From the day after nobody can be enrolled, booked or invited, and no block is issued.',
			byMs: startOfLocalDate(addDaysToDate(end.date, 1), zone),
			byText: null,
			act: isMine
				? { label: 'Record the renewal', href: `/studies/${studyId}/protocol#ethics` }
				: null
		}
	];
}

/** 'today', 'tomorrow', 'in 23 days'. */
export function tellDays(days: number): string {
	if (days === 0) return 'today';
	return days === 1 ? 'tomorrow' : `in ${days} days`;
}
