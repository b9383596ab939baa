import type {
	BookingProblem,
	ChainPlan,
	Interval,
	PlacedVisit,
	Weekday,
	WeeklyWindow
} from '../../booking/types.ts';
import { occupiedTime } from '../../booking/planned-visit.ts';
import type { ProtocolContent } from '../../protocol/protocol-content.ts';
import type { DryLab } from './dry-settings.ts';

/** What the protocol says about visits, as bookings are judged by it. */
export function planChain({ visits, booking }: ProtocolContent): ChainPlan {
	const hoursMean = booking.dayMeaning === 'clock-time' ? 'clock' : 'elapsed';
	return {
		visits: visits.map(({ gapBefore, ...visit }) => {
			const allowedPauses =
				visit.kind === 'practice' ? booking.pauses : { ...booking.pauses, count: 0 };
			const { number, label, kind, minutes, setupMinutes, cleanupMinutes } = visit;
			return {
				...{ number, label, kind, minutes, setupMinutes, cleanupMinutes },
				gapBefore: gapBefore && { ...gapBefore, allowedPauses, hoursMean }
			};
		}),
		clockWindow: {
			earliestMinute: booking.earliestMinute,
			latestMinute: booking.latestMinute,
			sameTimeToleranceMinutes: booking.sameTimeToleranceMinutes
		},
		weekdays: booking.weekdays as Weekday[]
	};
}

/** Everybody's places in the lab, kept while people are booked one after another. */
export class DryCalendar {
	readonly #plan: ChainPlan;
	readonly #lab: DryLab;
	readonly #chains = new Map<string, readonly PlacedVisit[]>();

	constructor(plan: ChainPlan, lab: DryLab) {
		this.#plan = plan;
		this.#lab = lab;
	}

	get plan(): ChainPlan {
		return this.#plan;
	}

	keep(code: string, chain: readonly PlacedVisit[]): void {
		this.#chains.set(code, chain);
	}

	/** The problem of one person, with everybody else's places taken. */
	ask(person: {
		code: string;
		availability: readonly WeeklyWindow[] | null;
		earliestStartMs: number;
		nowMs: number;
		plan?: ChainPlan;
	}): BookingProblem {
		const busy = this.#listBusy(person.code);
		const busyOf = (id: string | null) => (id === null ? [] : (busy.get(id) ?? []));
		const rooms = [...new Set(this.#lab.rigs.flatMap(({ roomId }) => roomId ?? []))];
		return {
			plan: person.plan ?? this.#plan,
			calendar: {
				zone: this.#lab.zone,
				holidays: this.#lab.holidays,
				rigs: this.#lab.rigs.map((rig) => ({ ...rig, busy: busyOf(rig.id) })),
				rooms: rooms.map((id) => ({ id, busy: busyOf(id) })),
				staff: this.#lab.staff.map((one) => ({ ...one, busy: busyOf(one.id) }))
			},
			participant: {
				zone: this.#lab.zone,
				availability: person.availability,
				busy: [],
				earliestStartMs: person.earliestStartMs
			},
			nowMs: person.nowMs
		};
	}

	/** Hours of all rigs that the kept places take, set-up and clean-up included. */
	countRigHours(): number {
		const taken = [...this.#chains.values()].flat().map((visit) => this.#occupied(visit));
		return taken.reduce((sum, { fromMs, toMs }) => sum + (toMs - fromMs) / 3_600_000, 0);
	}

	#listBusy(except: string): Map<string, Interval[]> {
		const busy = new Map<string, Interval[]>();
		for (const [code, chain] of this.#chains) {
			if (code === except) continue;
			for (const visit of chain) {
				const roomId = this.#lab.rigs.find(({ id }) => id === visit.rigId)?.roomId ?? null;
				for (const id of [visit.rigId, visit.staffId, roomId]) {
					if (id !== null) busy.set(id, [...(busy.get(id) ?? []), this.#occupied(visit)]);
				}
			}
		}
		return busy;
	}

	#occupied({ visitNumber, startMs }: PlacedVisit): Interval {
		const plan = this.#plan.visits.find(({ number }) => number === visitNumber);
		if (!plan) throw new RangeError(`the plan has no visit ${visitNumber}`);
		return occupiedTime(plan, startMs);
	}
}
