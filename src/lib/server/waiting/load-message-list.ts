import type { z } from 'zod';
import type { messageListSchema } from '$lib/people/message-list';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { loadRunningVersion } from '$lib/server/studies/load-gates';
import { loadLabZone } from './chain-items';
import { loadMessages } from './load-messages';

/** The mails of a study as its messages page lists them, newest first. */
export async function loadMessageList(
	db: Queryable,
	clock: Clock,
	grant: Grant<'message:read'>
): Promise<z.input<typeof messageListSchema>> {
	const messages = await loadMessages(db, grant);
	const version = await loadRunningVersion(db, clock, grant.studyId);
	const labels = new Map(version?.content.visits.map(({ number, label }) => [number, label]));
	return {
		zone: await loadLabZone(db, grant.labId),
		nowMs: clock.now(),
		rows: messages.map(({ visitNumber, ...message }) => ({
			...message,
			visitLabel: visitNumber === null ? '' : (labels.get(visitNumber) ?? `Visit ${visitNumber}`)
		}))
	};
}
