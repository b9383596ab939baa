import type { WorkContext } from '$lib/server/jobs/start-work';
import { checkEnvelopes } from './check-envelopes';

/** By the clock: what was decided since is held against the approved envelope. */
export async function workEnvelopes({ db, clock }: WorkContext): Promise<void> {
	await checkEnvelopes(db, clock);
}
