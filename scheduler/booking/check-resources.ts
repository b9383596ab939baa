import type { BrokenRule } from './broken-rule.ts';
import { overlaps } from './intervals.ts';
import { occupiedTime, type PlannedVisit } from './planned-visit.ts';
import type { BookingProblem, Interval, PlacedVisit } from './types.ts';
import { liesInsideHours } from './weekly-hours.ts';

/** Rig, room and staff of one visit, over the occupied time from set-up to clean-up. */
export function checkResources(
	problem: BookingProblem,
	chain: readonly PlannedVisit[],
	visit: PlannedVisit
): BrokenRule[] {
	const occupied = occupiedTime(visit.plan, visit.placed.startMs);
	const others = chain.filter((other) => isJudgedAgainst(other, visit));
	return [
		...checkRig(problem, { visit, occupied, others }),
		...checkRoom(problem, { visit, occupied, others }),
		...checkStaff(problem, { visit, occupied, others })
	];
}

type Occupation = { visit: PlannedVisit; occupied: Interval; others: readonly PlannedVisit[] };

/** A clash inside the chain is named once: at the later visit, unless that one is fixed. */
function isJudgedAgainst(other: PlannedVisit, visit: PlannedVisit): boolean {
	if (other === visit) return false;
	return other.placed.fixed === true || other.plan.number < visit.plan.number;
}

function checkRig({ calendar }: BookingProblem, occupation: Occupation): BrokenRule[] {
	const { visit, occupied, others } = occupation;
	const { rigId } = visit.placed;
	const where = placeOf(visit);
	const rig = calendar.rigs.find(({ id }) => id === rigId);
	const broken: BrokenRule[] = [];
	if (!rig || !liesInsideHours(occupied, rig.hours, calendar.zone)) {
		broken.push({ rule: 'rig-hours', ...where, rigId, occupied });
	}
	const taken = listTaken(others, (placed) => placed.rigId === rigId);
	const busy = [...(rig?.busy ?? []), ...taken].find((interval) => overlaps(interval, occupied));
	if (busy) broken.push({ rule: 'rig-busy', ...where, rigId, busy });
	return broken;
}

function checkRoom({ calendar }: BookingProblem, occupation: Occupation): BrokenRule[] {
	const { visit, occupied, others } = occupation;
	const roomOf = (rigId: string) => calendar.rigs.find(({ id }) => id === rigId)?.roomId ?? null;
	const roomId = roomOf(visit.placed.rigId);
	if (roomId === null) return [];
	const room = calendar.rooms.find(({ id }) => id === roomId);
	const sameRoomOtherRig = (placed: PlacedVisit) =>
		placed.rigId !== visit.placed.rigId && roomOf(placed.rigId) === roomId;
	const taken = listTaken(others, sameRoomOtherRig);
	const busy = [...(room?.busy ?? []), ...taken].find((interval) => overlaps(interval, occupied));
	return busy ? [{ rule: 'room-busy', ...placeOf(visit), roomId, busy }] : [];
}

function checkStaff({ calendar }: BookingProblem, occupation: Occupation): BrokenRule[] {
	const { visit, occupied, others } = occupation;
	const { staffId } = visit.placed;
	const where = placeOf(visit);
	const person = calendar.staff.find(({ id }) => id === staffId);
	const broken: BrokenRule[] = [];
	if (!person || !liesInsideHours(occupied, person.hours, calendar.zone)) {
		broken.push({ rule: 'staff-hours', ...where, staffId, occupied });
	}
	const taken = listTaken(others, (placed) => placed.staffId === staffId);
	const busy = [...(person?.busy ?? []), ...taken].find((interval) => overlaps(interval, occupied));
	if (busy) broken.push({ rule: 'staff-busy', ...where, staffId, busy });
	return broken;
}

function listTaken(
	others: readonly PlannedVisit[],
	uses: (placed: PlacedVisit) => boolean
): Interval[] {
	const using = others.filter(({ placed }) => uses(placed));
	return using.map(({ plan, placed }) => occupiedTime(plan, placed.startMs));
}

function placeOf({ plan, placed }: PlannedVisit) {
	return { visitNumber: plan.number, startMs: placed.startMs };
}
