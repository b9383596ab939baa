import { and, eq, isNull } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { ethicsApproval } from '$lib/server/db/schema';
import { actorOf, recordEvent } from '$lib/server/record/record-event';

/** Records that a board has taken its approval back: from now on it opens nothing. */
export async function revokeApproval(
	db: Database,
	clock: Clock,
	grant: Grant<'ethics:record'>,
	{ approvalId }: { approvalId: string }
): Promise<{ ok: true } | { ok: false; reason: 'no-such-approval' }> {
	const { studyId } = grant;
	return db.transaction(async (tx) => {
		const revoked = await tx
			.update(ethicsApproval)
			.set({ revokedAt: new Date(clock.now()) })
			.where(
				and(
					eq(ethicsApproval.id, approvalId),
					eq(ethicsApproval.studyId, studyId),
					isNull(ethicsApproval.revokedAt)
				)
			)
			.returning({ hash: ethicsApproval.protocolHash });
		const [row] = revoked;
		if (!row) return { ok: false as const, reason: 'no-such-approval' as const };
		await recordEvent(tx, clock, actorOf(grant), {
			kind: 'ethics-approval-revoked',
			item: 'protocol-text',
			studyId,
			body: { approvalId, protocolHash: row.hash }
		});
		return { ok: true as const };
	});
}
