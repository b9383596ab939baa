import type { RuleName } from './broken-rule.ts';
import type { FreeTime } from './free-time.ts';
import { covers, overlaps } from './intervals.ts';
import { MINUTE_MS, toWeekday } from './local-date.ts';
import { occupiedTime, visitTime } from './planned-visit.ts';
import type { Interval, VisitPlan } from './types.ts';

/** Visits are proposed on this grid of real time; every zone's quarter hours lie on it. */
export const SLOT_MS = 15 * MINUTE_MS;

/** A start that keeps every rule but those about other visits of the chain. */
export type CandidateStart = {
	startMs: number;
	/** Local day and minute in the lab's zone. */
	dayNumber: number;
	minute: number;
	rigIds: readonly string[];
	staffIds: readonly string[];
};

/** Every start of the grid that one visit could have by itself, ascending. */
export function listCandidateStarts(free: FreeTime, plan: VisitPlan): CandidateStart[] {
	const { fromMs, toMs } = free.horizon;
	const result: CandidateStart[] = [];
	for (let ms = Math.ceil(fromMs / SLOT_MS) * SLOT_MS; ms < toMs; ms += SLOT_MS) {
		const tried = tryStart(free, plan, ms);
		if (tried.ok) result.push(tried.candidate);
	}
	return result;
}

/** One start by itself: its rigs and staff, or the first rule that leaves no place for it. */
export function tryStart(
	free: FreeTime,
	plan: VisitPlan,
	startMs: number
): { ok: true; candidate: CandidateStart } | { ok: false; rule: RuleName } {
	const local = free.labClock.read(startMs);
	const rule = findDayRule(free, startMs, local) ?? findPersonRule(free, visitTime(plan, startMs));
	if (rule) return { ok: false, rule };
	const occupied = occupiedTime(plan, startMs);
	const rigs = free.rigs.filter((rig) => covers(rig.free, occupied));
	const staff = free.staff.filter((person) => covers(person.free, occupied));
	if (rigs.length === 0) return { ok: false, rule: findRigRule(free, occupied) };
	if (staff.length === 0) {
		const onDuty = free.staff.some((person) => covers(person.open, occupied));
		return { ok: false, rule: onDuty ? 'staff-busy' : 'staff-hours' };
	}
	const [rigIds, staffIds] = [rigs.map(({ id }) => id), staff.map(({ id }) => id)];
	return { ok: true, candidate: { startMs, ...local, rigIds, staffIds } };
}

function findDayRule(
	{ problem, holidays }: FreeTime,
	startMs: number,
	{ dayNumber, minute }: { dayNumber: number; minute: number }
): RuleName | null {
	const { plan, participant, nowMs } = problem;
	const { earliestMinute, latestMinute } = plan.clockWindow;
	if (startMs < nowMs) return 'in-the-past';
	if (participant.earliestStartMs !== null && startMs < participant.earliestStartMs) {
		return 'before-earliest-start';
	}
	if (holidays.has(dayNumber)) return 'holiday';
	if (!plan.weekdays.includes(toWeekday(dayNumber))) return 'weekday';
	const length = (latestMinute - earliestMinute + 1440) % 1440;
	const isInside = (minute - earliestMinute + 1440) % 1440 <= length;
	return isInside ? null : 'clock-window';
}

function findPersonRule({ person }: FreeTime, visit: Interval): RuleName | null {
	if (person.available && !covers(person.available, visit)) return 'availability';
	return person.busy.some((busy) => overlaps(busy, visit)) ? 'person-busy' : null;
}

function findRigRule({ rigs }: FreeTime, occupied: Interval): RuleName {
	const open = rigs.filter((rig) => covers(rig.open, occupied));
	if (open.length === 0) return 'rig-hours';
	return open.some((rig) => covers(rig.freeOfOthers, occupied)) ? 'room-busy' : 'rig-busy';
}
