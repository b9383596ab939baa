import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import type { StudyRole } from '$lib/server/db/schema';

/** One thing that waits for a person: what happened, what if nothing is done, by when, one act. */
export type WaitingItem = {
	title: string;
	detail: string;
	/** By when, in epoch milliseconds; null when nothing ends by itself. */
	dueAtMs: number | null;
	act: { label: string; href: string };
};

export type WaitingPlace = {
	personId: string;
	labId: string;
	studyId: string;
	isSteward: boolean;
	roles: readonly StudyRole[];
	waitingRoles: readonly StudyRole[];
};

/** Looks in one part of the product for what waits in a study for somebody of this standing. */
export type WaitingSource = (
	db: Queryable,
	clock: Clock,
	place: WaitingPlace
) => Promise<WaitingItem[]>;
