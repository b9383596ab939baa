import type { ExportedProtocol } from '$lib/protocol/exported-protocol';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { study } from '$lib/server/db/schema';
import { eq } from 'drizzle-orm';
import { findFrozenVersions } from './find-versions';

/** A frozen version as a file that can be imported again; null where there is no such version. */
export async function exportProtocol(
	db: Queryable,
	grant: Grant<'protocol:export'>,
	{ number }: { number: number }
): Promise<ExportedProtocol | null> {
	const versions = await findFrozenVersions(db, grant.studyId);
	const version = versions.find((one) => one.number === number);
	const [home] = await db
		.select({ title: study.publicTitle })
		.from(study)
		.where(eq(study.id, grant.studyId));
	if (!version || !home) return null;
	const { hash, content, frozenAtMs } = version;
	return {
		kind: 'ovalry-protocol',
		kindVersion: 1,
		title: home.title,
		version: number,
		hash,
		frozenAt: new Date(frozenAtMs).toISOString(),
		content
	};
}
