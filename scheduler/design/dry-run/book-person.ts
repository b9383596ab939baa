import { findChains } from '../../booking/find-chains.ts';
import { findWhatWouldHelp } from '../../booking/what-would-help.ts';
import { DAY_MS } from '../../booking/local-date.ts';
import type { BookingProblem, PlacedVisit, WeeklyWindow, Weekday } from '../../booking/types.ts';
import {
	drawBelow,
	drawOrder,
	drawUniform,
	type Uint32Stream
} from '../../random/random-stream.ts';
import type { DeadEnd, DeadEndCode, DrySettings } from './dry-settings.ts';
import type { DryCalendar } from './dry-calendar.ts';
import { describeHelp, describeObstacle } from './dry-words.ts';

/** Somebody invented who wants to take part. */
export interface DryArrival {
	readonly code: string;
	readonly arm: string;
	readonly arrivalMs: number;
	readonly availability: readonly WeeklyWindow[] | null;
}

const WORKDAYS: readonly Weekday[] = [1, 2, 3, 4, 5];
/** Whole days, mornings or afternoons: minutes of the day. */
const FREE: readonly (readonly [number, number] | null)[] = [null, null, [420, 780], [720, 1260]];

/** People in the order in which they come, arms in shuffled blocks. */
export function drawArrivals(
	arms: readonly string[],
	settings: DrySettings,
	stream: Uint32Stream
): DryArrival[] {
	const order: string[] = [];
	while (order.length < settings.people) order.push(...drawOrder(stream, arms));
	return order.slice(0, settings.people).map((arm, index) => {
		const free = FREE[drawBelow(stream, FREE.length)] ?? null;
		const apart = (7 * DAY_MS) / settings.arrivalsPerWeek;
		return {
			code: `D${String(index + 1).padStart(2, '0')}`,
			arm,
			arrivalMs: settings.startMs + Math.round((index + drawUniform(stream)) * apart),
			availability:
				free && WORKDAYS.map((weekday) => ({ weekday, fromMinute: free[0], toMinute: free[1] }))
		};
	});
}

export type BookedChain =
	{ ok: true; chain: readonly PlacedVisit[] } | { ok: false; deadEnd: DeadEnd };

/** Causes of dead ends found before: looking for what would help is slow, and people share causes. */
export type KnownHelp = Map<string, string>;

export interface BookingAsk {
	readonly calendar: DryCalendar;
	readonly problem: BookingProblem;
	readonly fixed: readonly PlacedVisit[];
	readonly horizonDays: number;
	readonly person: Pick<DryArrival, 'code' | 'arm'>;
	readonly code: DeadEndCode;
	readonly known: KnownHelp;
}

/** The earliest chain that keeps every rule, or why there is none and what would help. */
export function bookChain(ask: BookingAsk): BookedChain {
	const { problem, fixed, horizonDays, person } = ask;
	const horizonEndMs = problem.nowMs + horizonDays * DAY_MS;
	const found = findChains({ problem, fixed, horizonEndMs, chainCount: 1 });
	if (found.ok) return { ok: true, chain: found.chains[0]?.visits ?? [] };
	const { obstacle } = found;
	const text = describeObstacle(problem.plan, obstacle);
	const cause = `${ask.code} ${obstacle.visitNumber} ${obstacle.blockedBy[0]?.rule ?? ''}`;
	const remedy =
		ask.known.get(cause) ?? describeHelp(findWhatWouldHelp({ problem, fixed, horizonEndMs }));
	ask.known.set(cause, remedy);
	return {
		ok: false,
		deadEnd: {
			...{ code: ask.code, person: person.code, arm: person.arm, text, remedy },
			visit: obstacle.visitNumber
		}
	};
}
