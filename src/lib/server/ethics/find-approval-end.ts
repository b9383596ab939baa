import { and, eq, isNull, max } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { ethicsApproval } from '$lib/server/db/schema';
import { loadRunningVersion } from '$lib/server/studies/load-gates';
import { loadStudyZone } from '$lib/server/studies/load-study-zone';
import { localDateOf } from '$lib/time/wall-clock';
import { daysBetween } from '$lib/time/days-between';

/** Days before its end from which an approval is warned of; each step is more pressing. */
export const approvalWarnings = { first: 60, second: 30, last: 7 } as const;

export type ApprovalEnd = { date: string; days: number };

/** When the approval of a hash ends, from sixty days before; null when it is further off or over. */
export async function findApprovalEnd(
	db: Queryable,
	{ studyId, hash, today }: { studyId: string; hash: string; today: string }
): Promise<ApprovalEnd | null> {
	const [row] = await db
		.select({ expiresOn: max(ethicsApproval.expiresOn) })
		.from(ethicsApproval)
		.where(
			and(
				eq(ethicsApproval.studyId, studyId),
				eq(ethicsApproval.protocolHash, hash),
				isNull(ethicsApproval.revokedAt)
			)
		);
	if (!row?.expiresOn) return null;
	const days = daysBetween(today, row.expiresOn);
	return days >= 0 && days <= approvalWarnings.first ? { date: row.expiresOn, days } : null;
}

/** When the approval of the version that runs ends, if that is near. */
export async function loadApprovalEnd(
	db: Queryable,
	clock: Clock,
	grant: Grant<'protocol:read'>
): Promise<ApprovalEnd | null> {
	const { studyId } = grant;
	const running = await loadRunningVersion(db, clock, studyId);
	if (!running) return null;
	const today = localDateOf(clock.now(), await loadStudyZone(db, studyId));
	return findApprovalEnd(db, { studyId, hash: running.hash, today });
}
