import { createHash } from 'node:crypto';
import { eq, sql } from 'drizzle-orm';
import { systemClock, type Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { lab, membership, person, setupLink } from '$lib/server/db/schema';
import { recordEvent } from '$lib/server/record/record-event';

export type LinkState = 'open' | 'used' | 'expired' | 'unknown';

/** Whether the link from the terminal can still be used. Looking at it does not use it up. */
export async function checkSetupLink(db: Queryable, token: string): Promise<LinkState> {
	const [row] = await db
		.select()
		.from(setupLink)
		.where(eq(setupLink.tokenHash, hashToken(token)));
	const state = stateOf(row);
	// Only an empty database is set up by link: another link may have been used first.
	return state !== 'unknown' && (await hasLab(db)) ? 'used' : state;
}

export type SetupFacts = {
	personName: string;
	personEmail: string;
	name: string;
	zone: string;
	address: string;
	phone: string;
};
export type SetupAnswer =
	{ ok: true; personId: string; labId: string } | { ok: false; reason: Exclude<LinkState, 'open'> };

/**
 * Makes the lab and its first steward, and uses the link up. Whoever holds the link has proved to
 * sit at the server's terminal, so they are signed in without a mail.
 */
export async function setUpLab(
	db: Database,
	clock: Clock,
	{ token, facts }: { token: string; facts: SetupFacts }
): Promise<SetupAnswer> {
	return db.transaction(async (tx) => {
		const tokenHash = hashToken(token);
		const [link] = await tx
			.select()
			.from(setupLink)
			.where(eq(setupLink.tokenHash, tokenHash))
			.for('update');
		const state = stateOf(link);
		if (state !== 'open') return { ok: false, reason: state };
		await tx.execute(sql`lock table ${lab} in share row exclusive mode`);
		if (await hasLab(tx)) return { ok: false, reason: 'used' };
		const made = await makeLab(tx, clock, facts);
		await tx
			.update(setupLink)
			.set({ usedAt: new Date(systemClock.now()) })
			.where(eq(setupLink.tokenHash, tokenHash));
		await recordEvent(
			tx,
			clock,
			{ kind: 'person', personId: made.personId },
			{
				kind: 'lab-set-up',
				item: 'record',
				labId: made.labId,
				body: { name: facts.name, zone: facts.zone }
			}
		);
		return { ok: true, ...made };
	});
}

async function hasLab(db: Queryable): Promise<boolean> {
	const labs = await db.select({ id: lab.id }).from(lab).limit(1);
	return labs.length > 0;
}

async function makeLab(tx: Queryable, clock: Clock, facts: SetupFacts) {
	const { personName, personEmail, ...labFacts } = facts;
	const [steward] = await tx
		.insert(person)
		.values({ name: personName, email: personEmail })
		.returning({ id: person.id });
	const [made] = await tx
		.insert(lab)
		.values({ ...labFacts, email: personEmail })
		.returning({ id: lab.id });
	if (!steward || !made) throw new Error('inserted rows have ids');
	const now = new Date(clock.now());
	await tx.insert(membership).values({
		labId: made.id,
		personId: steward.id,
		isSteward: true,
		since: now,
		acceptedAt: now
	});
	return { personId: steward.id, labId: made.id };
}

type Link = typeof setupLink.$inferSelect;

/** The link lives by the system's clock, like the terminal that printed it. */
function stateOf(link: Link | undefined): LinkState {
	if (!link) return 'unknown';
	if (link.usedAt) return 'used';
	return link.expiresAt.getTime() <= systemClock.now() ? 'expired' : 'open';
}

function hashToken(token: string): Uint8Array {
	return createHash('sha256').update(token).digest();
}
