import type { DayPicture, Today } from '$lib/waiting/today';
import { localDateOf } from '$lib/time/wall-clock';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import {
	loadPersonRecords,
	visitLabel,
	type PersonRecord
} from '$lib/server/people/load-person-records';
import { addWays } from './add-ways';
import { loadLabZone } from './chain-items';
import { loadWaiting } from './load-waiting';

/** The first page of a study for one member: what waits, and for who books the day's visits. */
export async function loadToday(
	db: Queryable,
	clock: Clock,
	grant: Grant<'today:read'>
): Promise<Today> {
	const zone = await loadLabZone(db, grant.labId);
	const nowMs = clock.now();
	const waiting = await loadWaiting(db, clock, grant);
	const isCoordinator = grant.roles.includes('coordinator');
	const items = isCoordinator ? await addWays(db, clock, grant, { items: waiting, zone }) : waiting;
	const records = isCoordinator ? await loadPersonRecords(db, grant) : [];
	return { zone, nowMs, items, day: isCoordinator ? pictureDay(records, nowMs, zone) : null };
}

function pictureDay(records: readonly PersonRecord[], nowMs: number, zone: string): DayPicture {
	const today = localDateOf(nowMs, zone);
	const visits = records.flatMap(({ person, content, visits: own }) =>
		own.flatMap((visit): DayPicture['visits'] => {
			if (visit.state === 'cancelled' || localDateOf(visit.startMs, zone) !== today) return [];
			const { bookingId, participantId, rigName, startMs, endMs, state } = visit;
			const { occupiedFromMs, occupiedToMs } = visit;
			const label = visitLabel(content, visit.visitNumber);
			const times = { startMs, endMs, occupiedFromMs, occupiedToMs };
			return [{ bookingId, participantId, code: person.code, label, rigName, state, ...times }];
		})
	);
	const rigs = [...new Set(visits.map(({ rigName }) => rigName))].sort();
	return { rigs, visits: visits.sort((a, b) => a.startMs - b.startMs) };
}
