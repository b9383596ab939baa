import { taskRecordSchema, type TaskRecord } from '$scheduler/tasks/task-record';
import { eq } from 'drizzle-orm';
import { describeTerms } from '$lib/protocol/amendment';
import { describeProtocol, type ProtocolPart } from '$lib/protocol/describe-protocol';
import { readableContent } from '$lib/protocol/readable-content';
import { listDifferences, type Difference } from '$lib/protocol/list-differences';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { amendment } from '$lib/server/db/schema';
import { loadEnvelope, type LoadedEnvelope } from '$lib/server/envelope/load-envelope';
import { findDraftRow, findFrozenVersions, headOf, type VersionHead } from './find-versions';
import { mayReadRule } from './may-read-rule';

export type LoadedProtocol = {
	versions: VersionHead[];
	/** The version shown; null while none is frozen. */
	shown:
		| (VersionHead &
				Pick<ProtocolContent, 'arms' | 'visits'> & {
					id: string;
					parts: ProtocolPart[];
					/** Null for a task that no picture is known for. */
					task: TaskRecord | null;
					/** Approved numbers and breaches; null for who may not read the rule. */
					envelope: LoadedEnvelope | null;
				})
		| null;
	/** What the version declares of people in flight; null where it amends nothing. */
	amendment: { term: string; text: string }[] | null;
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
					id: version.id,
					parts: describeProtocol(version.content, { withRule }),
					arms: version.content.arms,
					visits: readableContent(version.content, { withRule }).visits,
					task: taskRecordSchema.safeParse(version.content.task).data ?? null,
					envelope: await loadEnvelope(db, grant, version)
				}
			: null,
		amendment: version ? await loadTerms(db, version.id) : null,
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

async function loadTerms(db: Queryable, versionId: string) {
	const [row] = await db.select().from(amendment).where(eq(amendment.protocolVersionId, versionId));
	return row ? describeTerms(row) : null;
}
