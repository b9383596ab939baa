import { HOUR_MS } from '../../booking/local-date.ts';
import {
	restRedundantPerson,
	startRedundantPerson,
	type RedundantState
} from '../../learners/redundant-person.ts';
import { redundantTraitsSchema, type RedundantTraits } from '../../learners/redundant-traits.ts';
import { decideNextBlock } from '../../policies/decide.ts';
import type { DecisionRecord } from '../../policies/decision-record.ts';
import type { PolicyMemory } from '../../policies/policy-memory.ts';
import type { LastBlock } from '../../policies/policy-state.ts';
import type { MasterBlock } from '../../policies/yoking/yoked-rule.ts';
import type { ProtocolContent } from '../../protocol/protocol-content.ts';
import { blocksOfArm } from '../../protocol/visit-plan.ts';
import type { Uint32Stream } from '../../random/random-stream.ts';
import { findRunnable, runBlock } from '../../simulation/run-block.ts';
import { createTask } from '../../tasks/create-task.ts';
import { createScaledTask, type ScaledTask } from '../../tasks/scaled-task.ts';
import { taskRecordSchema, type TaskRecord } from '../../tasks/task-record.ts';
import type { Attended } from './attend-visits.ts';
import {
	describeDecision,
	type DryPlace,
	type DryState,
	type MasterCourse
} from './describe-decision.ts';
import type { DeadEnd, DeadEndCode, DryVisit } from './dry-settings.ts';

export interface PractiseRequest {
	readonly content: ProtocolContent;
	readonly person: { readonly code: string; readonly arm: string };
	readonly visits: readonly Attended[];
	readonly master: MasterCourse | null;
	readonly stream: Uint32Stream;
}

export interface Practised {
	readonly visits: readonly DryVisit[];
	readonly deadEnds: readonly DeadEnd[];
	readonly course: readonly MasterBlock[];
}

/** Data are in and scored so long after a visit begins to end. */
const SCORED_HOURS = 1;
/** A rest, or a person who looked: how often one place may be asked again. */
const ASKS_MAX = 3;

/** A model person who explores a little and adapts within twenty trials. */
const TRAITS: RedundantTraits = redundantTraitsSchema.parse({
	...{ motorAlong: 0.9, motorAcross: 0.35, exploration: 0.4 },
	adaptation: { kind: 'single-rate', retention: 1, rate: 0.11 }
});

/** Runs every block of one person's visits by the rule of the arm, with the engine that decides live. */
export function practisePerson(request: PractiseRequest): Practised {
	const course = new Course(request);
	const visits = request.visits.map((visit) =>
		visit.came ? course.run(visit) : course.skip(visit)
	);
	return { visits, deadEnds: course.deadEnds, course: course.scored };
}

class Course {
	readonly #request: PractiseRequest;
	readonly #record: TaskRecord;
	readonly #task: ScaledTask;
	#state: RedundantState;
	#memory: PolicyMemory | null = null;
	#last: LastBlock | null = null;
	#lastEndMs: number | null = null;
	#trialsToday = 0;
	readonly deadEnds: DeadEnd[] = [];
	readonly scored: MasterBlock[] = [];

	constructor(request: PractiseRequest) {
		this.#request = request;
		this.#record = taskRecordSchema.parse(request.content.task);
		const task = createTask(this.#record);
		this.#task = createScaledTask(task);
		this.#state = startRedundantPerson(
			this.#task,
			task.variables.map(() => 0)
		);
	}

	skip({ number, startMs }: Attended): DryVisit {
		return { number, startMs, state: 'missed', kinds: [], fallbacks: 0 };
	}

	run(visit: Attended): DryVisit {
		const plan = this.#request.content.visits.find(({ number }) => number === visit.number);
		if (!plan) throw new RangeError(`the protocol has no visit ${visit.number}`);
		const blocks = blocksOfArm(plan, this.#request.person.arm);
		this.#rest(visit);
		this.#trialsToday = 0;
		const kinds: string[] = [];
		let fallbacks = 0;
		for (const [index, block] of blocks.entries()) {
			if (block.purpose === 'rest') {
				kinds.push('rest');
				continue;
			}
			const ran = this.#runPlace({ visit, plan: block, index, blocks });
			if (!ran) break;
			kinds.push(ran.kind);
			if (ran.isFallback) fallbacks += 1;
		}
		this.#lastEndMs = visit.startMs + plan.minutes * 60_000;
		return { number: visit.number, startMs: visit.startMs, state: 'attended', kinds, fallbacks };
	}

	#rest(visit: Attended): void {
		const before = this.#lastEndMs;
		if (before === null) return;
		const hours = Math.max(0, (visit.startMs - before) / HOUR_MS);
		this.#state = restRedundantPerson(TRAITS, this.#state, hours);
		const lead = this.#request.content.readyLeadHours;
		if (hours < lead) {
			this.#note('not-ready', visit.number, [
				`Decisions are due ${lead} h before the visit, but the visit before ended only ${Math.round(hours)} h earlier.`,
				'Shorten the lead of decisions, or lengthen the gap.'
			]);
		}
	}

	/** The kind that ran; null: nothing more can run today. */
	#runPlace(place: DryPlace): { kind: string; isFallback: boolean } | null {
		for (let ask = 0; ask < ASKS_MAX; ask++) {
			const decided = this.#decide(place, ask > 0);
			if (!decided) return null;
			if (decided.kind === 'stop') return this.#noteStop(place);
			if (decided.kind === 'wait') return this.#noteWait(place);
			const runnable = findRunnable(decided);
			if (runnable && runnable.kind !== 'rest') {
				this.#runOne(place, decided, runnable);
				return { kind: runnable.kind, isFallback: decided.kind === 'hold' };
			}
		}
		// Whoever should look has not: the guard rail runs plain practice.
		const fallback = { kind: 'practice' as const, parameters: { trials: place.plan.trials } };
		this.#runOne(place, null, fallback);
		return { kind: 'practice', isFallback: true };
	}

	#decide(place: DryPlace, release: boolean): DecisionRecord | null {
		try {
			return decideNextBlock({
				...{ task: this.#record, ...describeDecision(this.#describe(), place, release) },
				versions: { engineVersion: 'dry', runtimeVersion: 'dry' },
				digest: () => 'dry'
			});
		} catch (error) {
			if (!(error instanceof RangeError)) throw error;
			this.#note('cannot-run', place.visit.number, [
				`Block ${place.index + 1} (${place.plan.purpose}) cannot be run: ${error.message}.`,
				'Give the block what it needs, or another purpose.'
			]);
			return null;
		}
	}

	#describe(): DryState {
		const { content, person, master } = this.#request;
		return {
			...{ content, arm: person.arm, master, task: this.#task, memory: this.#memory },
			...{ last: this.#last, lastEndMs: this.#lastEndMs, trialsToday: this.#trialsToday },
			adaptiveBlocks: this.scored.length
		};
	}

	#runOne(
		place: DryPlace,
		decided: DecisionRecord | null,
		runnable: NonNullable<ReturnType<typeof findRunnable>>
	): void {
		const trials = runnable.parameters.trials ?? place.plan.trials;
		const left = place.blocks.slice(place.index + 1).reduce((sum, block) => sum + block.trials, 0);
		const ran = runBlock({
			...{ task: this.#task, traits: TRAITS, state: this.#state, stream: this.#request.stream },
			...{ ...runnable, parameters: { ...runnable.parameters, trials }, leftToday: left }
		});
		this.#state = ran.state;
		this.#last = ran.last;
		this.#trialsToday += trials;
		if (decided) this.#memory = decided.memory;
		if (place.plan.purpose !== 'adaptive') return;
		const { levels } = ran.last;
		this.scored.push({
			scoredAtHours: this.#findEnd(place.visit) / HOUR_MS + SCORED_HOURS,
			kind: runnable.kind,
			parameters: { ...runnable.parameters, trials, ...(levels ? { levels } : {}) }
		});
	}

	#findEnd({ number, startMs }: Attended): number {
		const plan = this.#request.content.visits.find((visit) => visit.number === number);
		return startMs + (plan?.minutes ?? 0) * 60_000;
	}

	#noteStop({ visit, index }: DryPlace): null {
		this.#note('day-full', visit.number, [
			`After ${this.#trialsToday} trials the day is full: block ${index + 1} and what follows it cannot run.`,
			'Raise the trials a visit, or plan fewer trials on this day.'
		]);
		return null;
	}

	#noteWait({ visit, index }: DryPlace): null {
		const { master, content } = this.#request;
		this.#note('master-behind', visit.number, [
			`Block ${index + 1} waits: ${master?.code ?? 'the master'} has not run the block that it repeats.`,
			`Plan the yoked chain more than ${content.yoking?.leadHours ?? 20} h behind, or let the late rule be plain practice.`
		]);
		return null;
	}

	#note(code: DeadEndCode, visit: number, [text, remedy]: [string, string]): void {
		const { code: person, arm } = this.#request.person;
		const label = this.#request.content.visits.find(({ number }) => number === visit)?.label ?? '';
		this.deadEnds.push({ code, person, arm, visit, text: `${label}: ${text}`, remedy });
	}
}
