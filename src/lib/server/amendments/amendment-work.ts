import type { WorkContext } from '$lib/server/jobs/start-work';
import { moveFollowers } from './move-followers';

/** By the clock: people who are due to follow an amendment are moved over. */
export async function workAmendments({ db, clock }: WorkContext): Promise<void> {
	await moveFollowers(db, clock);
}
