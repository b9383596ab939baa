/** One thing that waits for somebody: what happened, what if nothing is done, by when, one act. */
export type WaitingItem = {
	key: string;
	kind: WaitingKind;
	/** Whose oval stands beside it; null when it is about the study. */
	participantId: string | null;
	/** The visit it is about. */
	bookingId?: string | null | undefined;
	tone: 'rose' | 'amber' | 'plain';
	title: string;
	what: string;
	ifNothing: string;
	/** The instant by which it should be done; null when nothing presses. */
	byMs: number | null;
	/** In place of an instant: "before the first visit". */
	byText: string | null;
	/** Absent when the step is somebody else's. */
	act: { label: string; href: string } | null;
};

export type WaitingKind =
	| 'missed'
	| 'declined'
	| 'asks-other-time'
	| 'chain-broken'
	| 'attendance'
	| 'consent'
	| 'book'
	| 'mail-failed'
	| 'gate'
	| 'approval-ends'
	| 'renew-consent'
	| 'breach'
	| 'role'
	| 'sign-off'
	| 'seal'
	| 'held-decisions'
	| 'visits';

/** A few words for a table's cell. */
export const waitingWords: Record<WaitingKind, string> = {
	missed: 'mend the missed visit',
	declined: 'declined: settle it',
	'asks-other-time': 'answer the request',
	'chain-broken': 'mend the chain',
	attendance: 'say whether they came',
	consent: 'record consent',
	book: 'find places',
	'mail-failed': 'mend the address',
	gate: 'a gate is shut',
	'approval-ends': 'renew the approval',
	'renew-consent': 'renew consent',
	breach: 'look at a breach',
	role: 'confirm a role',
	'sign-off': 'sign off or comment',
	seal: 'seal the allocation',
	'held-decisions': 'settle decisions',
	visits: 'run today’s visits'
};

const rank = { rose: 0, amber: 1, plain: 2 };

/** Most urgent first: shut gates, then what should be done soonest, and of equals what costs most. */
export function sortByUrgency(items: readonly WaitingItem[]): WaitingItem[] {
	const due = (item: WaitingItem) =>
		item.kind === 'gate' ? Number.NEGATIVE_INFINITY : (item.byMs ?? Number.POSITIVE_INFINITY);
	const compare = (a: number, b: number) => (a === b ? 0 : a < b ? -1 : 1);
	return [...items].sort(
		(a, b) =>
			compare(due(a), due(b)) || rank[a.tone] - rank[b.tone] || a.title.localeCompare(b.title, 'en')
	);
}
