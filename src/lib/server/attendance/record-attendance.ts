import { eq } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { booking } from '$lib/server/db/schema';
import { explainClash, type Clash } from '$lib/server/bookings/explain-clash';
import { loadLabCalendar } from '$lib/server/bookings/load-lab-calendar';
import { loadVisits, type StudyVisit } from '$lib/server/bookings/load-visits';
import { countPlanChangeAnyway, lockLab } from '$lib/server/bookings/lock-plan';
import { revokeBundlesOfVisit } from '$lib/server/bundles/revoke-bundles';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { markCompletion } from './mark-completion';

export type Attendance = 'attended' | 'no-show';
export type AttendanceOutcome =
	| { ok: true; from: StudyVisit['state'] }
	| { ok: false; reason: 'not-found' | 'not-yet' | 'cancelled' }
	| { ok: false; reason: 'taken'; clash: Clash };

/**
 * Records that a person came, or did not come. A mistake is corrected the same way; both stay in
 * the record. A missed visit gives its place free.
 */
export async function recordAttendance(
	db: Database,
	clock: Clock,
	grant: Grant<'attendance:record'>,
	{ bookingId, outcome }: { bookingId: string; outcome: Attendance }
): Promise<AttendanceOutcome> {
	try {
		return await db.transaction(async (tx) => {
			await lockLab(tx, grant.labId);
			const [visit] = await loadVisits(tx, grant, { bookingIds: [bookingId] });
			const refusal = visit ? findRefusal(visit, outcome, clock.now()) : 'not-found';
			if (!visit || refusal) return { ok: false, reason: refusal ?? 'not-found' };
			if (visit.state === outcome) return { ok: true, from: visit.state };
			await countPlanChangeAnyway(tx, grant.studyId);
			const at = new Date(clock.now());
			if (outcome === 'no-show') await revokeBundlesOfVisit(tx, at, visit);
			await tx
				.update(booking)
				.set({ state: outcome, changedAt: at })
				.where(eq(booking.id, bookingId));
			await markCompletion(tx, clock, visit.participantId);
			await recordEvent(tx, clock, actorOf(grant), {
				kind: outcome === 'attended' ? 'visit-attended' : 'visit-missed',
				item: 'booking',
				labId: grant.labId,
				studyId: grant.studyId,
				participantId: visit.participantId,
				body: { visitNumber: visit.visitNumber, from: visit.state }
			});
			return { ok: true, from: visit.state };
		});
	} catch (error) {
		const lab = await loadLabCalendar(db, { labId: grant.labId });
		const clash = explainClash(error, lab, 'This person');
		if (!clash) throw error;
		return { ok: false, reason: 'taken', clash };
	}
}

function findRefusal(
	visit: StudyVisit,
	outcome: Attendance,
	nowMs: number
): 'not-yet' | 'cancelled' | null {
	if (visit.state === 'cancelled') return 'cancelled';
	const fromMs = outcome === 'attended' ? visit.occupiedFromMs : visit.startMs;
	return nowMs < fromMs ? 'not-yet' : null;
}
