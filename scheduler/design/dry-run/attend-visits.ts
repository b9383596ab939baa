import { HOUR_MS } from '../../booking/local-date.ts';
import type { ChainPlan, PlacedVisit } from '../../booking/types.ts';
import type { MissedDay } from '../../protocol/booking-rules.ts';
import { drawUniform, type Uint32Stream } from '../../random/random-stream.ts';
import { bookChain, type DryArrival, type KnownHelp } from './book-person.ts';
import type { DryCalendar } from './dry-calendar.ts';
import type { DeadEnd, DryPerson, DrySettings } from './dry-settings.ts';

/** A visit that was booked, and whether the person came. */
export interface Attended {
	readonly number: number;
	readonly startMs: number;
	readonly came: boolean;
}

export interface Attendance {
	readonly visits: readonly Attended[];
	readonly end: DryPerson['end'];
	readonly deadEnds: readonly DeadEnd[];
}

export interface AttendRequest {
	readonly arrival: DryArrival;
	readonly chain: readonly PlacedVisit[];
	readonly calendar: DryCalendar;
	readonly missedDay: MissedDay | null;
	readonly settings: DrySettings;
	readonly stream: Uint32Stream;
	readonly known: KnownHelp;
}

/** A missed visit is noticed so long after its start. */
const NOTICED_HOURS = 1;

/** One person's visits one after another: who comes, who leaves, what is done about a missed day. */
export function attendVisits(request: AttendRequest): Attendance {
	const { arrival, calendar, settings, stream } = request;
	const walk = new Walk(request);
	while (walk.waiting.length > 0) {
		const [visit] = walk.waiting;
		if (!visit) break;
		// Both are drawn at every visit, so that one setting does not move the other's draws.
		const [leaves, misses] = [
			drawUniform(stream) < settings.dropShare,
			drawUniform(stream) < settings.missShare
		];
		if (leaves) return walk.finish('left');
		if (!misses) walk.come(visit);
		else if (!walk.miss(visit)) return walk.finish('left');
	}
	calendar.keep(arrival.code, walk.kept);
	return walk.finish(walk.hasStopped ? 'stopped-practice' : 'finished');
}

class Walk {
	readonly #request: AttendRequest;
	readonly #visits: Attended[] = [];
	readonly #deadEnds: DeadEnd[] = [];
	#missed = 0;
	waiting: readonly PlacedVisit[];
	kept: readonly PlacedVisit[] = [];
	hasStopped = false;

	constructor(request: AttendRequest) {
		this.#request = request;
		this.waiting = request.chain;
	}

	come(visit: PlacedVisit): void {
		this.#visits.push({ number: visit.visitNumber, startMs: visit.startMs, came: true });
		this.kept = [...this.kept, { ...visit, fixed: true }];
		this.waiting = this.waiting.slice(1);
	}

	/** False: the person cannot go on. */
	miss(visit: PlacedVisit): boolean {
		const { missedDay } = this.#request;
		this.#visits.push({ number: visit.visitNumber, startMs: visit.startMs, came: false });
		const isPractice = this.#kindOf(visit) === 'practice';
		if (isPractice) this.#missed += 1;
		if (!missedDay) return this.#giveUp(visit);
		const isTooMany = isPractice && this.#missed > missedDay.mostMissed;
		if (isPractice && (missedDay.rule === 'stop-practice' || isTooMany)) return this.#stop(visit);
		return this.#makeUp(visit, missedDay);
	}

	finish(end: DryPerson['end']): Attendance {
		this.#request.calendar.keep(this.#request.arrival.code, this.kept);
		return { visits: this.#visits, end, deadEnds: this.#deadEnds };
	}

	/** The missed visit again, later ones where they were if they can stay. */
	#makeUp(visit: PlacedVisit, { rule, withinHours }: MissedDay): boolean {
		const later = this.waiting.slice(1);
		const stays = rule === 'make-up' ? this.#book(visit, later) : null;
		const moved = stays ?? this.#book(visit, []);
		const again = moved?.find(({ visitNumber }) => visitNumber === visit.visitNumber);
		const isInTime =
			again !== undefined &&
			(rule !== 'make-up' || again.startMs - visit.startMs <= withinHours * HOUR_MS);
		if (!moved || !again || !isInTime) {
			if (moved && again) this.#noteLate(visit, { again, withinHours });
			return false;
		}
		this.waiting = moved.filter(({ fixed, visitNumber }) => !fixed || isLater(visitNumber));
		return true;

		function isLater(number: number): boolean {
			return later.some(({ visitNumber }) => visitNumber === number);
		}
	}

	/** No more practice; retention and transfer take place all the same. */
	#stop(visit: PlacedVisit): boolean {
		this.hasStopped = true;
		const { plan } = this.#request.calendar;
		const came = new Set(this.kept.map(({ visitNumber }) => visitNumber));
		const visits = plan.visits.filter(
			({ number, kind }) => came.has(number) || (kind !== 'practice' && number > visit.visitNumber)
		);
		if (!visits.some(({ number }) => !came.has(number))) {
			this.waiting = [];
			return true;
		}
		const found = this.#book(visit, [], { ...plan, visits });
		this.waiting = (found ?? []).filter(({ visitNumber }) => !came.has(visitNumber));
		return found !== null;
	}

	#book(
		visit: PlacedVisit,
		later: readonly PlacedVisit[],
		plan: ChainPlan = this.#request.calendar.plan
	): readonly PlacedVisit[] | null {
		const { arrival, calendar, settings, known } = this.#request;
		const nowMs = visit.startMs + NOTICED_HOURS * HOUR_MS;
		const problem = calendar.ask({ ...arrival, nowMs, earliestStartMs: nowMs, plan });
		const fixed = [...this.kept, ...later.map((one) => ({ ...one, fixed: true }))];
		const booked = bookChain({
			...{ calendar, problem, fixed, known, person: arrival, code: 'no-rebooking' },
			horizonDays: settings.horizonDays
		});
		if (booked.ok) return booked.chain;
		// That later visits must move is what the rule allows; only the last try is a dead end.
		if (later.length === 0) this.#deadEnds.push(booked.deadEnd);
		return null;
	}

	#noteLate(visit: PlacedVisit, late: { again: PlacedVisit; withinHours: number }): void {
		const hours = Math.round((late.again.startMs - visit.startMs) / HOUR_MS);
		this.#note('no-rebooking', visit, [
			`${this.#labelOf(visit)} was missed; the next place lies ${hours} h later, but it must be made up within ${late.withinHours} h.`,
			'Allow more hours for making up, or let the chain shift.'
		]);
	}

	#giveUp(visit: PlacedVisit): boolean {
		this.#note('nothing-declared', visit, [
			`${this.#labelOf(visit)} was missed, and the protocol does not say what is done then.`,
			'Declare a rule for missed days.'
		]);
		return false;
	}

	#note(code: DeadEnd['code'], visit: PlacedVisit, [text, remedy]: [string, string]): void {
		const { code: person, arm } = this.#request.arrival;
		this.#deadEnds.push({ code, person, arm, visit: visit.visitNumber, text, remedy });
	}

	#planOf({ visitNumber }: PlacedVisit) {
		return this.#request.calendar.plan.visits.find(({ number }) => number === visitNumber);
	}

	#kindOf(visit: PlacedVisit) {
		return this.#planOf(visit)?.kind;
	}

	#labelOf(visit: PlacedVisit): string {
		return this.#planOf(visit)?.label ?? `Visit ${visit.visitNumber}`;
	}
}
