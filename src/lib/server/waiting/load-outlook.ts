import { addDaysToDate } from '$lib/time/add-local-days';
import { startOfLocalDate } from '$lib/time/start-of-local-day';
import { localDateOf, utcOffsetMinutes } from '$lib/time/wall-clock';
import type { Grant } from '$lib/server/access/require-permission';
import { isLive } from '$lib/server/bookings/load-visits';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { findApprovalEnd, type ApprovalEnd } from '$lib/server/ethics/find-approval-end';
import { countDaysToVisit } from '$lib/server/people/load-people-list';
import { loadPersonRecords, type PersonRecord } from '$lib/server/people/load-person-records';
import { loadRunningVersion } from '$lib/server/studies/load-gates';
import { loadLabZone } from './chain-items';

/** What a careful colleague would say of the days to come. */
export type Outlook = {
	/** When the ethics approval ends, within sixty days. */
	approvalEnds: ApprovalEnd | null;
	/** The next change of the lab's clocks, within thirty days. */
	clockChange: { date: string; days: number; fromMinutes: number; toMinutes: number } | null;
	tomorrow: { visitCount: number; firstMs: number | null; readyLeadHours: number } | null;
	/** Days from consent to first visit, in the order of consent. */
	consentToVisitDays: number[];
};

/** The outlook of a study; people's part of it only for who books. */
export async function loadOutlook(
	db: Queryable,
	clock: Clock,
	grant: Grant<'today:read'>
): Promise<Outlook> {
	const zone = await loadLabZone(db, grant.labId);
	const today = localDateOf(clock.now(), zone);
	const version = await loadRunningVersion(db, clock, grant.studyId);
	const isCoordinator = grant.roles.includes('coordinator');
	const records = isCoordinator ? await loadPersonRecords(db, grant) : [];
	return {
		approvalEnds: version
			? await findApprovalEnd(db, { studyId: grant.studyId, hash: version.hash, today })
			: null,
		clockChange: findClockChange(today, zone),
		tomorrow: isCoordinator
			? pictureTomorrow(records, {
					today,
					zone,
					readyLeadHours: version?.content.readyLeadHours ?? 0
				})
			: null,
		consentToVisitDays: [...records]
			.sort((a, b) => (a.person.consentedAtMs ?? 0) - (b.person.consentedAtMs ?? 0))
			.flatMap((record) => countDaysToVisit(record, zone) ?? [])
	};
}

/** The first day of the next thirty whose start has another offset than the day after it. */
export function findClockChange(today: string, zone: string): Outlook['clockChange'] {
	for (let days = 0; days <= 30; days += 1) {
		const date = addDaysToDate(today, days);
		const fromMinutes = utcOffsetMinutes(startOfLocalDate(date, zone), zone);
		const next = startOfLocalDate(addDaysToDate(date, 1), zone);
		const toMinutes = utcOffsetMinutes(next, zone);
		if (fromMinutes !== toMinutes) return { date, days, fromMinutes, toMinutes };
	}
	return null;
}

function pictureTomorrow(
	records: readonly PersonRecord[],
	{ today, zone, readyLeadHours }: { today: string; zone: string; readyLeadHours: number }
): Outlook['tomorrow'] {
	const tomorrow = addDaysToDate(today, 1);
	const starts = records
		.flatMap(({ visits }) => visits.filter(isLive))
		.map(({ startMs }) => startMs)
		.filter((startMs) => localDateOf(startMs, zone) === tomorrow);
	const firstMs = starts.length > 0 ? Math.min(...starts) : null;
	return { visitCount: starts.length, firstMs, readyLeadHours };
}
