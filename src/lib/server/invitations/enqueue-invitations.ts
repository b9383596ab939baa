import { and, asc, eq, isNull } from 'drizzle-orm';
import type { Clock } from '$lib/server/clock';
import type { Transaction } from '$lib/server/db/client';
import { booking, participant, protocolVersion } from '$lib/server/db/schema';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { loadVisit } from './load-visit';
import type { MailSetting } from './mail-setting';
import { loadThread, nextStampMs } from './visit-thread';
import { writeVisitRow } from './write-visit-row';

const HOUR_MS = 3_600_000;

export type InvitationsQueued = { ok: true; queuedCount: number } | { ok: false; reason: 'erased' };

/**
 * Invites a participant to every booked visit whose time has come to be told: call it after
 * booking, after allocation and after a repair; it invites to no visit twice.
 *
 * The baseline visit's invitation goes at once. The others wait for the allocation and leave the
 * protocol's number of hours after the baseline visit, the same in every arm; one mail a visit.
 */
export async function enqueueInvitations(
	tx: Transaction,
	clock: Clock,
	setting: MailSetting,
	participantId: string
): Promise<InvitationsQueued> {
	const timeline = await loadTimeline(tx, participantId);
	const waiting = await tx
		.select({ id: booking.id, visitNumber: booking.visitNumber })
		.from(booking)
		.where(
			and(
				eq(booking.participantId, participantId),
				eq(booking.state, 'booked'),
				isNull(booking.invitedAt)
			)
		)
		.orderBy(asc(booking.visitNumber));
	let queuedCount = 0;
	for (const { id, visitNumber } of waiting) {
		const dueMs = timeline.dueMs(visitNumber, clock.now());
		if (dueMs === null) continue;
		const queued = await enqueueInvitation(tx, clock, setting, { bookingId: id, dueMs });
		if (!queued.ok) return queued;
		queuedCount += queued.isQueued ? 1 : 0;
	}
	return { ok: true, queuedCount };
}

async function enqueueInvitation(
	tx: Transaction,
	clock: Clock,
	setting: MailSetting,
	{ bookingId, dueMs }: { bookingId: string; dueMs: number }
): Promise<{ ok: true; isQueued: boolean } | { ok: false; reason: 'erased' }> {
	const found = await loadVisit(tx, setting, bookingId);
	if (!found.ok) return found;
	const { visit } = found;
	const isTooLate = visit.told.startMs <= clock.now();
	if (visit.booking.invitedAt !== null || isTooLate) return { ok: true, isQueued: false };
	const thread = await loadThread(tx, setting, visit);
	await writeVisitRow(tx, setting, visit, {
		kind: 'invitation',
		sequence: visit.booking.sequence,
		previous: null,
		inReplyTo: null,
		stampMs: nextStampMs(thread, clock.now()),
		dueMs
	});
	const invitedAt = new Date(clock.now());
	await tx.update(booking).set({ invitedAt }).where(eq(booking.id, bookingId));
	return { ok: true, isQueued: true };
}

async function loadTimeline(tx: Transaction, participantId: string) {
	const [row] = await tx
		.select({ allocatedAt: participant.allocatedAt, content: protocolVersion.content })
		.from(participant)
		.innerJoin(protocolVersion, eq(protocolVersion.id, participant.protocolVersionId))
		.where(eq(participant.id, participantId))
		.for('update', { of: participant });
	if (!row) throw new RangeError('No participant has this id');
	const { content, allocatedAt } = row;
	const baselineEndMs = allocatedAt ? await baselineEnd(tx, participantId, content) : null;
	return {
		dueMs(visitNumber: number, nowMs: number): number | null {
			if (isBaseline(content, visitNumber)) return nowMs;
			if (!allocatedAt) return null;
			const delayMs = content.invitationDelayHours * HOUR_MS;
			return Math.max(nowMs, (baselineEndMs ?? allocatedAt.getTime()) + delayMs);
		}
	};
}

/** The end of the latest baseline visit that was not cancelled or missed. */
async function baselineEnd(
	tx: Transaction,
	participantId: string,
	content: ProtocolContent
): Promise<number | null> {
	const rows = await tx
		.select({ visitNumber: booking.visitNumber, during: booking.during, state: booking.state })
		.from(booking)
		.where(eq(booking.participantId, participantId));
	const ends = rows
		.filter((row) => isBaseline(content, row.visitNumber))
		.filter((row) => row.state === 'booked' || row.state === 'attended')
		.map((row) => row.during.endsAt.getTime());
	return ends.length === 0 ? null : Math.max(...ends);
}

/** A first visit without a baseline visit in the protocol opens the study: it is told at once. */
function isBaseline({ visits }: ProtocolContent, visitNumber: number): boolean {
	const planned = visits.find((visit) => visit.number === visitNumber);
	const hasBaseline = visits.some((visit) => visit.kind === 'baseline');
	return hasBaseline ? planned?.kind === 'baseline' : visitNumber === visits[0]?.number;
}
