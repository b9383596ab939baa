import { findChainChanges } from '$lib/protocol/find-chain-changes';
import { findFreezeFaults } from '$lib/protocol/findings';
import { listDifferences, type Difference } from '$lib/protocol/list-differences';
import { readContent } from '$lib/protocol/read-content';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { loadRunningVersion } from '$lib/server/studies/load-gates';
import { loadStudyZone } from '$lib/server/studies/load-study-zone';
import { localDateOf } from '$lib/time/wall-clock';
import { loadDraftContent } from './draft-content';
import { findDraftRow, findFrozenVersions } from './find-versions';
import { loadRigLimits } from './load-draft';

export type Freezing = {
	number: number;
	revision: number;
	/** How many things are still to be mended; the draft's margin names each. */
	faultCount: number;
	/** What changes against the newest frozen version; null for the first. */
	compared: { number: number; differences: Difference[] } | null;
	/** The version that runs; null before one does: then nothing of people in flight is asked. */
	running: {
		number: number;
		today: string;
		consentTextVersion: string;
		isNewConsentText: boolean;
		/** Why people in flight could not follow, in words; empty when they can. */
		chainChanges: string[];
	} | null;
};

/** What freezing the draft would do, for whoever freezes it; null while nothing is being written. */
export async function loadFreezing(
	db: Queryable,
	clock: Clock,
	grant: Grant<'protocol:freeze'>
): Promise<Freezing | null> {
	const row = await findDraftRow(db, grant.studyId);
	if (!row) return null;
	const { number, revision } = row;
	const draft = loadDraftContent(row.content);
	const faultCount = findFreezeFaults(draft, await loadRigLimits(db, grant.labId)).length;
	const read = readContent(draft);
	if (!read.ok) {
		const count = Math.max(1, faultCount, read.faults.length);
		return { number, revision, faultCount: count, compared: null, running: null };
	}
	const [last] = await findFrozenVersions(db, grant.studyId);
	const running = await loadRunningVersion(db, clock, grant.studyId);
	const reader = { withRule: true };
	return {
		number,
		revision,
		faultCount,
		compared: last
			? {
					number: last.number,
					differences: listDifferences(last.content, read.content, reader)
				}
			: null,
		running: running && {
			number: running.number,
			today: localDateOf(clock.now(), await loadStudyZone(db, grant.studyId)),
			consentTextVersion: read.content.consentTextVersion,
			isNewConsentText: read.content.consentTextVersion !== running.content.consentTextVersion,
			chainChanges: findChainChanges(running.content, read.content)
		}
	};
}
