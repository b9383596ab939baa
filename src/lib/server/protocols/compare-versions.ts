import { listDifferences, type Difference } from '$lib/protocol/list-differences';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { findFrozenVersions, headOf, type VersionHead } from './find-versions';
import { mayReadRule } from './may-read-rule';

export type ComparedVersions = {
	versions: VersionHead[];
	from: VersionHead;
	to: VersionHead;
	differences: Difference[];
};

/**
 * What changed between any two frozen versions, in the order asked for; null where the study has no
 * such versions. Without a choice: the newest against the one before.
 */
export async function compareVersions(
	db: Queryable,
	grant: Grant<'protocol:read'>,
	wanted: { from?: number | undefined; to?: number | undefined }
): Promise<ComparedVersions | null> {
	const frozen = await findFrozenVersions(db, grant.studyId);
	const find = (number: number | undefined, index: number) =>
		number === undefined ? frozen[index] : frozen.find((version) => version.number === number);
	const [from, to] = [find(wanted.from, 1), find(wanted.to, 0)];
	if (!from || !to) return null;
	return {
		versions: frozen.map(headOf),
		from: headOf(from),
		to: headOf(to),
		differences: listDifferences(from.content, to.content, { withRule: mayReadRule(grant) })
	};
}
