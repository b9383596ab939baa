import { and, asc, eq, inArray, isNull, sql } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import {
	block,
	booking,
	bundle,
	decision,
	lab,
	participant,
	protocolVersion,
	rig,
	room,
	staff
} from '$lib/server/db/schema';
import type { PeopleKeys } from '$lib/server/keys/people-keys';
import { loadFirstNames } from '$lib/server/people/load-first-names';
import { startOfLocalDay } from '$lib/time/start-of-local-day';

/** What one block shows to somebody who must not know what it is. */
export type BoardBlock = {
	number: number;
	state: 'scored' | 'ready' | 'not-yet' | 'no-file';
	/** When "not yet" turns to "ready", when known. */
	readyAtMs: number | null;
};
export type BoardVisit = {
	bookingId: string;
	code: string;
	/** First name only, where the role may know it; null otherwise. */
	firstName: string | null;
	visitNumber: number;
	label: string;
	startsAtMs: number;
	endsAtMs: number;
	rig: string;
	room: string;
	staff: string;
	state: 'booked' | 'attended';
	blocks: BoardBlock[];
};
export type VisitBoard = { zone: string; visits: BoardVisit[] };

/** Blocks of one visit follow in this fixed time in every arm, whatever the work took. */
export const insideVisitReadyMs = 5_000;

/**
 * Visits of the study from the start of today to the end of tomorrow, with each block "ready" or
 * "not yet". The query reads neither arm, kind, parameters nor what was settled.
 */
export async function loadVisitBoard(
	db: Database,
	clock: Clock,
	grant: Grant<'visit:run'>,
	keys: PeopleKeys
): Promise<VisitBoard> {
	const zone = await loadZone(db, grant.labId);
	const from = startOfLocalDay(clock.now(), zone);
	const until = startOfLocalDay(from + 2.5 * 86_400_000, zone);
	const rows = await db
		.select({
			bookingId: booking.id,
			participantId: booking.participantId,
			code: participant.code,
			visitNumber: booking.visitNumber,
			during: booking.during,
			occupied: booking.occupied,
			state: booking.state,
			rig: rig.name,
			hasKey: sql<boolean>`${rig.publicKey} is not null`,
			room: room.name,
			staff: staff.name,
			visits: sql<
				{ number: number; label: string; blocks: { number: number }[] }[]
			>`${protocolVersion.content}->'visits'`
		})
		.from(booking)
		.innerJoin(participant, eq(participant.id, booking.participantId))
		.innerJoin(protocolVersion, eq(protocolVersion.id, participant.protocolVersionId))
		.innerJoin(rig, eq(rig.id, booking.rigId))
		.innerJoin(room, eq(room.id, booking.roomId))
		.innerJoin(staff, eq(staff.id, booking.staffId))
		.where(
			and(
				eq(booking.studyId, grant.studyId),
				inArray(booking.state, ['booked', 'attended']),
				sql`${booking.during} && tstzrange(${new Date(from).toISOString()}, ${new Date(until).toISOString()})`
			)
		)
		.orderBy(asc(sql`lower(${booking.during})`), asc(participant.code));
	const readiness = await loadReadiness(
		db,
		rows.map((row) => row.participantId)
	);
	const scored = await loadScored(
		db,
		rows.map((row) => row.participantId)
	);
	const names = grant.sees('contact').has('first-name')
		? await loadFirstNames(db, keys, [...new Set(rows.map((row) => row.participantId))])
		: new Map<string, string>();
	const visits = rows.flatMap((row): BoardVisit[] => {
		const plan = row.visits.find((visit) => visit.number === row.visitNumber);
		if (!plan || (row.state !== 'booked' && row.state !== 'attended')) return [];
		const blocks = plan.blocks.map(({ number }): BoardBlock => {
			const key = `${row.participantId} ${row.visitNumber} ${number}`;
			if (scored.has(key)) return { number, state: 'scored', readyAtMs: null };
			const found = readiness.get(key);
			const readyAtMs = found?.readyAtMs ?? null;
			const isReady =
				readyAtMs !== null &&
				found?.hasFile === true &&
				clock.now() >= readyAtMs + insideVisitReadyMs;
			if (isReady) return { number, state: 'ready', readyAtMs };
			return { number, state: row.hasKey ? 'not-yet' : 'no-file', readyAtMs };
		});
		return [
			{
				bookingId: row.bookingId,
				code: row.code,
				firstName: names.get(row.participantId) ?? null,
				visitNumber: row.visitNumber,
				label: plan.label,
				startsAtMs: row.during.startsAt.getTime(),
				endsAtMs: row.during.endsAt.getTime(),
				rig: row.rig,
				room: row.room,
				staff: row.staff,
				state: row.state,
				blocks
			}
		];
	});
	return { zone, visits };
}

async function loadZone(db: Database, labId: string): Promise<string> {
	const [row] = await db.select({ zone: lab.zone }).from(lab).where(eq(lab.id, labId));
	return row?.zone ?? 'UTC';
}

async function loadReadiness(db: Database, participantIds: string[]) {
	if (participantIds.length === 0)
		return new Map<string, { readyAtMs: number | null; hasFile: boolean }>();
	const rows = await db
		.select({
			participantId: decision.participantId,
			visitNumber: decision.visitNumber,
			blockNumber: decision.blockNumber,
			readyAt: decision.readyAt,
			bundleId: bundle.id
		})
		.from(decision)
		.leftJoin(bundle, and(eq(bundle.decisionId, decision.id), isNull(bundle.revokedAt)))
		.where(inArray(decision.participantId, participantIds));
	return new Map(
		rows.map((row) => [
			`${row.participantId} ${row.visitNumber} ${row.blockNumber}`,
			{ readyAtMs: row.readyAt?.getTime() ?? null, hasFile: row.bundleId !== null }
		])
	);
}

async function loadScored(db: Database, participantIds: string[]): Promise<Set<string>> {
	if (participantIds.length === 0) return new Set();
	const rows = await db
		.select({
			participantId: block.participantId,
			visitNumber: block.visitNumber,
			blockNumber: block.blockNumber
		})
		.from(block)
		.where(inArray(block.participantId, participantIds));
	return new Set(rows.map((row) => `${row.participantId} ${row.visitNumber} ${row.blockNumber}`));
}
