import { and, desc, eq } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { ethicsApproval, protocolVersion } from '$lib/server/db/schema';
import { loadStudyZone } from '$lib/server/studies/load-study-zone';
import { localDateOf } from '$lib/time/wall-clock';

export type ListedApproval = {
	id: string;
	board: string;
	reference: string;
	approvedOn: string;
	expiresOn: string;
	versionNumber: number;
	state: 'valid' | 'expired' | 'revoked';
};

/** Every ethics approval of the study, the one that lasts longest first. */
export async function listApprovals(
	db: Queryable,
	clock: Clock,
	grant: Grant<'protocol:read'>
): Promise<ListedApproval[]> {
	const today = localDateOf(clock.now(), await loadStudyZone(db, grant.studyId));
	const rows = await db
		.select({ approval: ethicsApproval, versionNumber: protocolVersion.number })
		.from(ethicsApproval)
		.innerJoin(
			protocolVersion,
			and(
				eq(protocolVersion.studyId, ethicsApproval.studyId),
				eq(protocolVersion.hash, ethicsApproval.protocolHash)
			)
		)
		.where(eq(ethicsApproval.studyId, grant.studyId))
		.orderBy(desc(ethicsApproval.expiresOn));
	return rows.map(({ approval, versionNumber }) => ({
		id: approval.id,
		board: approval.board,
		reference: approval.reference,
		approvedOn: approval.approvedOn,
		expiresOn: approval.expiresOn,
		versionNumber,
		state: approval.revokedAt ? 'revoked' : approval.expiresOn < today ? 'expired' : 'valid'
	}));
}
