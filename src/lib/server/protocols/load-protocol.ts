import { taskRecordSchema, type TaskRecord } from '$scheduler/tasks/task-record';
import { describeProtocol, type ProtocolPart } from '$lib/protocol/describe-protocol';
import { listDifferences, type Difference } from '$lib/protocol/list-differences';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { findDraftRow, findFrozenVersions, type FrozenVersion } from './find-versions';

export type VersionHead = Pick<FrozenVersion, 'number' | 'hash' | 'frozenAtMs' | 'frozenBy'>;

export type LoadedProtocol = {
	versions: VersionHead[];
	/** The version shown; null while none is frozen. */
	shown:
		| (VersionHead &
				Pick<ProtocolContent, 'arms' | 'visits'> & {
					parts: ProtocolPart[];
					task: TaskRecord;
				})
		| null;
	/** The version it is compared with, and what changed since. */
	compared: { number: number; differences: Difference[] } | null;
	/** Number of the version being written; null when there is none or it is not theirs to see. */
	draftNumber: number | null;
};

/** The readable protocol for everybody with a part in the study: what is frozen, nothing per person. */
export async function loadProtocol(
	db: Queryable,
	grant: Grant<'protocol:read'>,
	{ number }: { number?: number | undefined } = {}
): Promise<LoadedProtocol> {
	const frozen = await findFrozenVersions(db, grant.studyId);
	const index = number === undefined ? 0 : frozen.findIndex((row) => row.number === number);
	const [version, earlier] = index < 0 ? [] : frozen.slice(index, index + 2);
	const draft = grant.roles.includes('investigator') ? await findDraftRow(db, grant.studyId) : null;
	const withRule = mayReadRule(grant);
	return {
		versions: frozen.map(headOf),
		shown: version
			? {
					...headOf(version),
					parts: describeProtocol(version.content, { withRule }),
					arms: version.content.arms,
					visits: version.content.visits,
					task: taskRecordSchema.parse(version.content.task)
				}
			: null,
		compared:
			version && earlier
				? {
						number: earlier.number,
						differences: listDifferences(earlier.content, version.content, { withRule })
					}
				: null,
		draftNumber: draft?.number ?? null
	};
}

/** How blocks are chosen is told to those who may know block parameters at least by design. */
function mayReadRule(grant: Grant): boolean {
	const levels = grant.sees('block-parameters');
	return levels.has('design') || levels.has('yes');
}

function headOf({ number, hash, frozenAtMs, frozenBy }: FrozenVersion): VersionHead {
	return { number, hash, frozenAtMs, frozenBy };
}
