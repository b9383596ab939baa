import { and, desc, eq, isNotNull } from 'drizzle-orm';
import type { WaitingItem } from '$lib/waiting/waiting-item';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { allocationSeal, protocolVersion, signOff } from '$lib/server/db/schema';
import type { MissingGate } from '$lib/server/studies/load-gates';

/**
 * Steps that the newest frozen version waits for while an older one runs: the gates of the running
 * version are open and do not name them.
 */
export async function findVersionSteps(
	db: Queryable,
	grant: Grant<'today:read'>,
	gates: readonly MissingGate[]
): Promise<WaitingItem[]> {
	const newest = await loadNewest(db, grant.studyId);
	if (!newest || gates.some(({ code }) => code === 'not-signed' || code === 'not-sealed'))
		return [];
	const { number, hash } = newest;
	const base = `/studies/${grant.studyId}`;
	const items: WaitingItem[] = [];
	if (grant.roles.includes('statistician') && !(await hasVerdict(db, grant.studyId, hash))) {
		items.push({
			...frame('sign-off', number),
			title: `Version ${number} waits for your sign-off`,
			what: `It is frozen, hash ${hash.slice(0, 12)}. The older version runs on until it is signed.`,
			act: { label: 'Read it and sign or comment', href: `${base}/power` }
		});
	}
	if (grant.roles.includes('unblinded-statistician') && !(await hasSeal(db, grant.studyId, hash))) {
		items.push({
			...frame('seal', number),
			title: `Version ${number} waits for its seal`,
			what: `It is frozen, hash ${hash.slice(0, 12)}. The older version runs on until it is sealed.`,
			act: { label: 'Seal the allocation', href: `${base}/allocation` }
		});
	}
	return items;
}

function frame(kind: 'sign-off' | 'seal', number: number) {
	return {
		key: `${kind} ${number}`,
		kind,
		participantId: null,
		tone: 'amber' as const,
		ifNothing: 'Nobody is enrolled under the new version.',
		byMs: null,
		byText: 'before the new version runs'
	};
}

async function loadNewest(db: Queryable, studyId: string) {
	const [row] = await db
		.select({ number: protocolVersion.number, hash: protocolVersion.hash })
		.from(protocolVersion)
		.where(and(eq(protocolVersion.studyId, studyId), isNotNull(protocolVersion.hash)))
		.orderBy(desc(protocolVersion.number))
		.limit(1);
	return row?.hash ? { number: row.number, hash: row.hash } : null;
}

async function hasVerdict(db: Queryable, studyId: string, hash: string): Promise<boolean> {
	const rows = await db
		.select({ id: signOff.id })
		.from(signOff)
		.where(and(eq(signOff.studyId, studyId), eq(signOff.protocolHash, hash)))
		.limit(1);
	return rows.length > 0;
}

async function hasSeal(db: Queryable, studyId: string, hash: string): Promise<boolean> {
	const rows = await db
		.select({ id: allocationSeal.id })
		.from(allocationSeal)
		.where(and(eq(allocationSeal.studyId, studyId), eq(allocationSeal.protocolHash, hash)))
		.limit(1);
	return rows.length > 0;
}
