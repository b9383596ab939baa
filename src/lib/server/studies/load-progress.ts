import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { findMissingGates, loadRunningVersion, type MissingGate } from './load-gates';

export type StudyProgress = {
	/** Number of the version that runs; null while none does. */
	runningNumber: number | null;
	missing: MissingGate[];
};

/** What the study waits for before people may be enrolled, for every page that says so. */
export async function loadProgress(
	db: Queryable,
	clock: Clock,
	grant: Grant<'protocol:read' | 'power:read' | 'allocation:read'>
): Promise<StudyProgress> {
	const running = await loadRunningVersion(db, clock, grant.studyId);
	return {
		runningNumber: running?.number ?? null,
		missing: await findMissingGates(db, clock, grant.studyId)
	};
}
