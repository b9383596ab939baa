import { eq, isNull, and } from 'drizzle-orm';
import type { RigLimit } from '$lib/protocol/fault';
import type { ProtocolDraft } from '$lib/protocol/protocol-draft';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { rig } from '$lib/server/db/schema';
import { loadDraftContent } from './draft-content';
import { findDraftRow } from './find-versions';

export type LoadedDraft = {
	number: number;
	revision: number;
	draft: ProtocolDraft;
};

/** The draft with the revision that the next save must name; null when nothing is being written. */
export async function loadDraft(
	db: Queryable,
	grant: Grant<'protocol:edit' | 'protocol:freeze'>
): Promise<LoadedDraft | null> {
	const row = await findDraftRow(db, grant.studyId);
	if (!row) return null;
	return {
		number: row.number,
		revision: row.revision,
		draft: loadDraftContent(row.content)
	};
}

/** The lab's rigs as far as a protocol must fit them, by name. */
export async function loadRigLimits(db: Queryable, labId: string): Promise<RigLimit[]> {
	const rows = await db
		.select({ name: rig.name, limits: rig.limits })
		.from(rig)
		.where(and(eq(rig.labId, labId), isNull(rig.retiredAt)))
		.orderBy(rig.name);
	return rows.map(({ name, limits }) => ({ ...limits, name }));
}
