import type { BrokenRule } from './broken-rule.ts';
import { SLOT_MS } from './candidate-starts.ts';
import { checkChain } from './check-chain.ts';
import { layOutFreeTime, type FreeTime } from './free-time.ts';
import { covers } from './intervals.ts';
import { DAY_MS, MINUTE_MS, toLocalDate } from './local-date.ts';
import { occupiedTime, pairWithPlan } from './planned-visit.ts';
import type { BookingProblem, Interval, LocalDate, PlacedVisit } from './types.ts';

export type JudgeStartsOptions = {
	problem: BookingProblem;
	/** The person's chain as it is booked now. */
	chain: readonly PlacedVisit[];
	/** The visit to be moved. */
	visitNumber: number;
	/** Starts in here are judged. */
	window: Interval;
};

/** One place on the week's grid. */
export type JudgedStart = {
	rigId: string;
	/** Null where the clocks jump over this local time. */
	startMs: number | null;
	/** Local date and minute in the lab's zone. */
	date: LocalDate;
	minute: number;
	verdict: { ok: true; staffId: string } | { ok: false; broken: BrokenRule };
};

export type JudgeMoveOptions = Omit<JudgeStartsOptions, 'window'> & {
	startMs: number;
	rigId: string;
};

export type JudgedMove =
	{ ok: true; visits: PlacedVisit[] } | { ok: false; broken: [BrokenRule, ...BrokenRule[]] };

/**
 * Every quarter hour of a window, on every rig: may the visit be moved there while the others stay,
 * and if not, which rule is the first that breaks.
 *
 * Shapes: chain and window in; places out, rig by rig in the order of time, with the local times
 * that the clocks jump over in their place. Rules that the chain breaks elsewhere are not counted
 * against a place.
 * Units: epoch milliseconds; minutes of the lab's day.
 * Method: the independent checker on the chain with the one visit moved.
 * Source: method sheet "Booking" 9. Accuracy: exact; scheduler/booking/judge-starts.test.ts.
 * @throws RangeError when the chain does not hold the visit
 * @example judgeStarts({ problem, chain, visitNumber: 6, window: week })
 */
export function judgeStarts(options: JudgeStartsOptions): JudgedStart[] {
	const { problem, window } = options;
	const mover = createMover(options, window);
	const missing = listMissingTimes(mover.free, window);
	return problem.calendar.rigs.flatMap(({ id: rigId }) => {
		const starts: JudgedStart[] = [];
		for (let ms = Math.ceil(window.fromMs / SLOT_MS) * SLOT_MS; ms < window.toMs; ms += SLOT_MS) {
			starts.push(judgePlace(mover, rigId, ms));
		}
		const absent = missing.map((local) => absentPlace(options.visitNumber, rigId, local));
		return [...starts, ...absent].sort(byLocalTime);
	});
}

/**
 * One place for the visit to be moved to: the new chain, or every rule that the move breaks.
 * @throws RangeError when the chain does not hold the visit
 */
export function judgeMove(options: JudgeMoveOptions): JudgedMove {
	const { startMs, rigId } = options;
	const mover = createMover(options, { fromMs: startMs, toMs: startMs + SLOT_MS });
	const visits = mover.move(startMs, rigId);
	const [first, ...more] = mover.check(visits);
	return first ? { ok: false, broken: [first, ...more] } : { ok: true, visits };
}

type Mover = {
	free: FreeTime;
	/** The chain with the visit at another place, and the staff member who can be there. */
	move(startMs: number, rigId: string): PlacedVisit[];
	/** Rules that the moved visit breaks, its own and towards its neighbours. */
	check(visits: readonly PlacedVisit[]): BrokenRule[];
	visitNumber: number;
};

function createMover(options: Omit<JudgeStartsOptions, 'window'>, window: Interval): Mover {
	const { problem, chain, visitNumber } = options;
	const visit = pairWithPlan(problem, chain).find(({ plan }) => plan.number === visitNumber);
	if (!visit) throw new RangeError(`the chain holds no visit ${visitNumber}`);
	const { plan, placed } = visit;
	const free = layOutFreeTime(problem, window);
	function move(startMs: number, rigId: string): PlacedVisit[] {
		const occupied = occupiedTime(plan, startMs);
		const able = free.staff.filter((one) => covers(one.free, occupied)).map(({ id }) => id);
		const staffId = able.includes(placed.staffId) ? placed.staffId : (able[0] ?? placed.staffId);
		const moved = { visitNumber, startMs, rigId, staffId };
		return chain.map((one) => (one.visitNumber === visitNumber ? moved : one));
	}
	function check(visits: readonly PlacedVisit[]): BrokenRule[] {
		const isMoved = (one: PlacedVisit) => one.visitNumber === visitNumber;
		return checkChain(
			problem,
			visits.map((one) => ({ ...one, fixed: !isMoved(one) }))
		);
	}
	return { free, move, check, visitNumber };
}

function judgePlace(mover: Mover, rigId: string, startMs: number): JudgedStart {
	const visits = mover.move(startMs, rigId);
	const { dayNumber, minute } = mover.free.labClock.read(startMs);
	const place = { rigId, startMs, date: toLocalDate(dayNumber), minute };
	const [broken] = mover.check(visits);
	if (broken) return { ...place, verdict: { ok: false, broken } };
	const moved = visits.find(({ visitNumber }) => visitNumber === mover.visitNumber);
	return { ...place, verdict: { ok: true, staffId: moved?.staffId ?? '' } };
}

/** Quarter hours of the lab's clock that a change of clocks leaves out. */
function listMissingTimes({ labClock }: FreeTime, { fromMs, toMs }: Interval) {
	const segments = labClock.listSegments(fromMs, toMs);
	return segments.flatMap((segment, index) => {
		const before = segments[index - 1];
		if (!before || before.offsetMs >= segment.offsetMs) return [];
		const [first, end] = [segment.fromMs + before.offsetMs, segment.fromMs + segment.offsetMs];
		const count = Math.ceil((end - first) / SLOT_MS);
		return Array.from({ length: count }, (_, slot) => {
			const localMs = first + slot * SLOT_MS;
			const dayNumber = Math.floor(localMs / DAY_MS);
			const minute = (localMs - dayNumber * DAY_MS) / MINUTE_MS;
			return { date: toLocalDate(dayNumber), minute };
		});
	});
}

function absentPlace(
	visitNumber: number,
	rigId: string,
	{ date, minute }: { date: LocalDate; minute: number }
): JudgedStart {
	const broken = { rule: 'clock-change-gap', visitNumber, startMs: null, date, minute } as const;
	return { rigId, startMs: null, date, minute, verdict: { ok: false, broken } };
}

/** By instant; a missing time stands by its local time, where no instant has it. */
function byLocalTime(a: JudgedStart, b: JudgedStart): number {
	if (a.startMs !== null && b.startMs !== null) return a.startMs - b.startMs;
	return a.date < b.date ? -1 : a.date > b.date ? 1 : a.minute - b.minute;
}
