import { HOUR_MS } from '../../booking/local-date.ts';
import { createSeededStream } from '../../random/seeded-stream.ts';
import type { ProtocolContent } from '../../protocol/protocol-content.ts';
import { attendVisits, type Attendance } from './attend-visits.ts';
import {
	bookChain,
	drawArrivals,
	type BookedChain,
	type DryArrival,
	type KnownHelp
} from './book-person.ts';
import { DryCalendar, planChain } from './dry-calendar.ts';
import type { DeadEnd, DryPerson, DryRunReport, DryRunRequest } from './dry-settings.ts';
import type { MasterCourse } from './describe-decision.ts';
import { practisePerson } from './practise-person.ts';

/** How far a dry run has come. */
export interface DryProgress {
	readonly done: number;
	readonly people: number;
}

/**
 * Invented people walk the whole protocol: booked into the lab by the calendar's own search, decided for by
 * the rule of their arm with the engine that decides live, missing days and leaving by chance.
 *
 * Shapes:  a protocol, a lab and settings in; progress while it runs; at the end people, and the dead ends
 *          they ran into.
 * Decision: everything given and the seed; the same seed walks the same people.
 * Source:  method sheets "Booking" 6, D0 to D5. Accuracy: run-dry.test.ts.
 * @throws {ZodError} a protocol whose task or policy cannot be read
 */
export function* walkDry(request: DryRunRequest): Generator<DryProgress, DryRunReport> {
	const { content, settings } = request;
	const arms = content.arms.map(({ key }) => key);
	const arrivals = orderForMasters(
		content,
		drawArrivals(arms, settings, createSeededStream(settings.seed, 0))
	);
	const walk = new DryWalk(request);
	for (const [index, arrival] of arrivals.entries()) {
		walk.take(arrival, index);
		yield { done: index + 1, people: arrivals.length };
	}
	return walk.report();
}

/** The whole walk at once. */
export function runDry(request: DryRunRequest): DryRunReport {
	const walk = walkDry(request);
	for (;;) {
		const next = walk.next();
		if (next.done) return next.value;
	}
}

/** Nobody can follow a master who has not come yet: partners come after as many masters. */
function orderForMasters(content: ProtocolContent, arrivals: readonly DryArrival[]): DryArrival[] {
	const masterOf = new Map(content.arms.map(({ key, master }) => [key, master]));
	const ready = new Map<string, number>();
	const waiting: DryArrival[] = [];
	const ordered: DryArrival[] = [];
	const take = (arrival: DryArrival) => {
		ordered.push(arrival);
		ready.set(arrival.arm, (ready.get(arrival.arm) ?? 0) + 1);
		const next = waiting.findIndex(({ arm }) => masterOf.get(arm) === arrival.arm);
		const [partner] = next < 0 ? [] : waiting.splice(next, 1);
		if (partner) {
			const arrivalMs = Math.max(partner.arrivalMs, arrival.arrivalMs);
			ordered.push({ ...partner, arrivalMs });
			ready.set(arrival.arm, (ready.get(arrival.arm) ?? 0) - 1);
		}
	};
	for (const arrival of arrivals) {
		const master = masterOf.get(arrival.arm);
		if (master === undefined) take(arrival);
		else if ((ready.get(master) ?? 0) > 0) {
			ordered.push(arrival);
			ready.set(master, (ready.get(master) ?? 0) - 1);
		} else waiting.push(arrival);
	}
	return [...ordered, ...waiting];
}

/** A master without a partner yet, with the starts of the visits that were run. */
interface MasterPlace {
	readonly arm: string;
	readonly course: MasterCourse;
	readonly starts: ReadonlyMap<number, number>;
}

/** How often a partner's chain is put off before its waits are shown instead. */
const PUT_OFF_MAX = 8;

class DryWalk {
	readonly #request: DryRunRequest;
	readonly #calendar: DryCalendar;
	readonly #known: KnownHelp = new Map();
	readonly #people: DryPerson[] = [];
	readonly #deadEnds: DeadEnd[] = [];
	readonly #masters: MasterPlace[] = [];

	constructor(request: DryRunRequest) {
		this.#request = request;
		this.#calendar = new DryCalendar(planChain(request.content), request.lab);
	}

	take(arrival: DryArrival, index: number): void {
		const { content, settings } = this.#request;
		const arm = content.arms.find(({ key }) => key === arrival.arm);
		const master = arm?.rule === 'yoked' ? this.#pair(arm.master ?? '') : null;
		if (arm?.rule === 'yoked' && !master) return this.#refuse(arrival);
		const booked = this.#book(arrival, master);
		if (!booked.ok) return this.#leaveOut(arrival, booked.deadEnd);
		this.#calendar.keep(arrival.code, booked.chain);
		const attendance = attendVisits({
			...{ arrival, chain: booked.chain, calendar: this.#calendar, settings, known: this.#known },
			missedDay: content.missedDay ?? null,
			stream: createSeededStream(settings.seed, 2 * index + 1)
		});
		this.#practise(arrival, { attendance, master: master?.course ?? null, index });
	}

	/** A partner's chain is put off until each of its visits comes the declared hours behind the master's. */
	#book(arrival: DryArrival, master: MasterPlace | null): BookedChain {
		const { content, settings } = this.#request;
		const leadMs = (content.yoking?.leadHours ?? 20) * HOUR_MS;
		let earliestStartMs = arrival.arrivalMs;
		for (let attempt = 0; ; attempt++) {
			const nowMs = arrival.arrivalMs;
			const problem = this.#calendar.ask({ ...arrival, nowMs, earliestStartMs });
			const booked = bookChain({
				...{ calendar: this.#calendar, problem, fixed: [], known: this.#known },
				...{ person: arrival, code: 'no-chain', horizonDays: settings.horizonDays }
			});
			if (!booked.ok || !master) return booked;
			const ahead = booked.chain.map(({ visitNumber, startMs }) => {
				const own = master.starts.get(visitNumber);
				return own === undefined ? 0 : own + leadMs - startMs;
			});
			const shortMs = Math.max(0, ...ahead);
			if (shortMs === 0 || attempt === PUT_OFF_MAX) return booked;
			const first = booked.chain[0]?.startMs ?? earliestStartMs;
			earliestStartMs = Math.max(earliestStartMs, first) + shortMs;
		}
	}

	report(): DryRunReport {
		const starts = this.#people.flatMap(({ visits }) => visits.map(({ startMs }) => startMs));
		return {
			people: this.#people.toSorted((a, b) => (a.code < b.code ? -1 : 1)),
			deadEnds: this.#deadEnds,
			rigHours: this.#calendar.countRigHours(),
			firstMs: starts.length > 0 ? Math.min(...starts) : null,
			lastMs: starts.length > 0 ? Math.max(...starts) : null
		};
	}

	#practise(
		arrival: DryArrival,
		walked: { attendance: Attendance; master: MasterCourse | null; index: number }
	): void {
		const { attendance, master, index } = walked;
		const { content, settings } = this.#request;
		const ran = practisePerson({
			...{ content, person: arrival, visits: attendance.visits, master },
			stream: createSeededStream(settings.seed, 2 * index + 2)
		});
		this.#people.push({
			...{ code: arrival.code, arm: arrival.arm, master: master?.code ?? null },
			...{ visits: ran.visits, end: attendance.end }
		});
		this.#deadEnds.push(...attendance.deadEnds, ...ran.deadEnds);
		this.#masters.push({
			arm: arrival.arm,
			starts: new Map(attendance.visits.map(({ number, startMs }) => [number, startMs])),
			course: {
				...{ code: arrival.code, blocks: ran.course },
				withdrawn: attendance.end !== 'finished'
			}
		});
	}

	#pair(arm: string) {
		const at = this.#masters.findIndex((master) => master.arm === arm);
		return at < 0 ? null : (this.#masters.splice(at, 1)[0] ?? null);
	}

	#refuse(arrival: DryArrival): void {
		this.#leaveOut(arrival, {
			...{ code: 'no-master', person: arrival.code, arm: arrival.arm, visit: null },
			text: 'No master is left to follow: every one has a partner, or could not be booked.',
			remedy: 'Allocate as many people to the master arm, and let the yoked arm begin later.'
		});
	}

	#leaveOut({ code, arm }: DryArrival, deadEnd: DeadEnd): void {
		this.#people.push({ code, arm, master: null, visits: [], end: 'not-booked' });
		this.#deadEnds.push(deadEnd);
	}
}
