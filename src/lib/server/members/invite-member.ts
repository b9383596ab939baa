import { and, eq, isNull } from 'drizzle-orm';
import type { Logger } from 'pino';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Settings } from '$lib/server/config';
import type { Database, Queryable } from '$lib/server/db/client';
import { lab, membership, person } from '$lib/server/db/schema';
import { makeSignInLink } from '$lib/server/auth/make-sign-in-link';
import { sendMemberInvitation } from '$lib/server/invitations/send-sign-in-mail';
import { recordLabEvent } from '$lib/server/labs/record-lab-event';

export const invitationDays = 7;

type Manager = Grant<'lab:manage'>;
export type InvitingPlace = { db: Database; clock: Clock; settings: Settings; log: Logger };
type Invitation = { name: string; email: string; isSteward: boolean };
export type InviteAnswer =
	{ ok: true; personId: string; wasMailed: boolean } | { ok: false; reason: 'is-member' };

/**
 * Makes somebody a member and mails them the link to join. Somebody who left may come back; their
 * earlier roles do not. A mail server that does not answer leaves the member, and says so.
 */
export async function inviteMember(
	place: InvitingPlace,
	grant: Manager,
	invitation: Invitation
): Promise<InviteAnswer> {
	const { db, clock } = place;
	const added = await db.transaction(async (tx) => {
		const personId = await ensurePerson(tx, invitation);
		const isNew = await startMembership(tx, clock, grant, { personId, ...invitation });
		if (!isNew) return null;
		const body = { personId, isSteward: invitation.isSteward };
		await recordLabEvent(tx, clock, grant, { kind: 'member-invited', body });
		return personId;
	});
	if (!added) return { ok: false, reason: 'is-member' };
	const wasMailed = await mailInvitation(place, grant, invitation);
	return { ok: true, personId: added, wasMailed };
}

export type ResendAnswer = { ok: true } | { ok: false; reason: 'no-such-member' | 'mail-failed' };

/** Mails a member the link to join once more. */
export async function resendInvitation(
	place: InvitingPlace,
	grant: Manager,
	personId: string
): Promise<ResendAnswer> {
	const { db, clock } = place;
	const [found] = await db
		.select({ name: person.name, email: person.email })
		.from(membership)
		.innerJoin(person, eq(person.id, membership.personId))
		.where(
			and(
				eq(membership.labId, grant.labId),
				eq(membership.personId, personId),
				isNull(membership.endedAt)
			)
		);
	if (!found) return { ok: false, reason: 'no-such-member' };
	const to = { name: found.name ?? found.email, email: found.email };
	if (!(await mailInvitation(place, grant, to))) return { ok: false, reason: 'mail-failed' };
	await recordLabEvent(db, clock, grant, { kind: 'invitation-sent-again', body: { personId } });
	return { ok: true };
}

/** The person with this address, made if there is none; a name they have already is kept. */
async function ensurePerson(tx: Queryable, { name, email }: Invitation): Promise<string> {
	await tx.insert(person).values({ name, email }).onConflictDoNothing();
	const [row] = await tx
		.select({ id: person.id, name: person.name })
		.from(person)
		.where(eq(person.email, email));
	if (!row) throw new Error('an inserted person exists');
	if (!row.name) await tx.update(person).set({ name }).where(eq(person.id, row.id));
	return row.id;
}

/** False when they are a member already. */
async function startMembership(
	tx: Queryable,
	clock: Clock,
	grant: Manager,
	{ personId, isSteward }: { personId: string; isSteward: boolean }
): Promise<boolean> {
	const fresh = {
		isSteward,
		invitedBy: grant.personId,
		since: new Date(clock.now()),
		acceptedAt: null,
		endedAt: null
	};
	const [known] = await tx
		.select({ endedAt: membership.endedAt })
		.from(membership)
		.where(and(eq(membership.labId, grant.labId), eq(membership.personId, personId)))
		.for('update');
	if (known && !known.endedAt) return false;
	await tx
		.insert(membership)
		.values({ labId: grant.labId, personId, ...fresh })
		.onConflictDoUpdate({ target: [membership.labId, membership.personId], set: fresh });
	return true;
}

async function mailInvitation(
	{ db, settings, log }: InvitingPlace,
	grant: Manager,
	to: { name: string; email: string }
): Promise<boolean> {
	const [facts] = await db
		.select({ name: lab.name, zone: lab.zone })
		.from(lab)
		.where(eq(lab.id, grant.labId));
	if (!facts) throw new Error('the lab of a grant exists');
	const { link, expiresAtMs } = await makeSignInLink(db, settings, {
		email: to.email,
		to: '/home',
		validMinutes: invitationDays * 24 * 60
	});
	try {
		await sendMemberInvitation(settings, {
			to: { name: to.name, email: to.email },
			link,
			expiresAtMs,
			labName: facts.name,
			labZone: facts.zone,
			inviterName: grant.personName,
			roles: []
		});
		return true;
	} catch (error) {
		log.error({ mail: 'member invitation', fault: faultOf(error) });
		return false;
	}
}

/** The mail server's own code; never an address. */
function faultOf(error: unknown): string {
	return error instanceof Error ? `${error.name}: ${error.message.slice(0, 120)}` : 'unknown';
}
