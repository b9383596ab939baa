import { HOUR_MS } from '../../booking/local-date.ts';
import {
	restRedundantPerson,
	startRedundantPerson,
	type RedundantState
} from '../../learners/redundant-person.ts';
import { redundantTraitsSchema, type RedundantTraits } from '../../learners/redundant-traits.ts';
import { decideNextBlock } from '../../policies/decide.ts';
import type { DecisionRecord, DecisionInputsInput } from '../../policies/decision-record.ts';
import type { PolicyMemory } from '../../policies/policy-memory.ts';
import {
	equaliseBlockLengths,
	policySettingsSchema,
	type PolicySettings
} from '../../policies/policy-settings.ts';
import type { LastBlock } from '../../policies/policy-state.ts';
import type { MasterBlock } from '../../policies/yoking/yoked-rule.ts';
import type { BlockPlan } from '../../protocol/block-plan.ts';
import { planListedBlock } from '../../protocol/plan-listed-block.ts';
import type { ProtocolContent } from '../../protocol/protocol-content.ts';
import { blocksOfArm } from '../../protocol/visit-plan.ts';
import type { Uint32Stream } from '../../random/random-stream.ts';
import { findRunnable, runBlock } from '../../simulation/run-block.ts';
import { createTask } from '../../tasks/create-task.ts';
import { createScaledTask, type ScaledTask } from '../../tasks/scaled-task.ts';
import { taskRecordSchema, type TaskRecord } from '../../tasks/task-record.ts';
import type { Attended } from './attend-visits.ts';
import type { DeadEnd, DeadEndCode, DryVisit } from './dry-settings.ts';

/** What a partner can be given of a master: blocks of adaptive time in order, and when they were scored. */
export interface MasterCourse {
	readonly code: string;
	readonly withdrawn: boolean;
	readonly blocks: readonly MasterBlock[];
}

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

interface Place {
	readonly visit: Attended;
	readonly plan: BlockPlan;
	readonly index: number;
	readonly blocks: readonly BlockPlan[];
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
	#runPlace(place: Place): { kind: string; isFallback: boolean } | null {
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

	#decide(place: Place, release: boolean): DecisionRecord | null {
		try {
			return decideNextBlock({
				...{ task: this.#record, protocol: this.#settings(place), rule: this.#rule(place) },
				state: this.#describe(place, release),
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

	#settings({ plan }: Place): PolicySettings {
		const policy = policySettingsSchema.parse(this.#request.content.policy);
		return equaliseBlockLengths({ ...policy, blockTrials: plan.trials });
	}

	#rule(place: Place): NonNullable<DecisionInputsInput['rule']> {
		const { content, person, master } = this.#request;
		const arm = content.arms.find(({ key }) => key === person.arm);
		const isAdaptive = place.plan.purpose === 'adaptive';
		if (isAdaptive && arm?.rule === 'adaptive') return { kind: 'adaptive' };
		if (isAdaptive && arm?.rule === 'yoked' && master) return this.#follow(place, master);
		const cloud = this.#memory?.cloud ?? null;
		return { kind: 'fixed', block: planListedBlock(place.plan, { task: this.#task, cloud }) };
	}

	#follow({ visit }: Place, master: MasterCourse): NonNullable<DecisionInputsInput['rule']> {
		const { content } = this.#request;
		const plan = content.visits.find(({ number }) => number === visit.number);
		return {
			...{ kind: 'yoked', settings: content.yoking ?? {}, block: this.scored.length },
			nowHours: visit.startMs / HOUR_MS,
			previousEndHours: (this.#lastEndMs ?? visit.startMs) / HOUR_MS,
			gapMaxHours: plan?.gapBefore?.maxHours ?? 0,
			master: { ...master, blocks: [...master.blocks] }
		};
	}

	#describe({ visit, index, blocks }: Place, release: boolean): DecisionInputsInput['state'] {
		const later = blocks.slice(index).filter(({ purpose }) => purpose !== 'rest');
		const gap = this.#lastEndMs === null ? null : (visit.startMs - this.#lastEndMs) / HOUR_MS;
		return {
			...{ day: visit.number, blockInDay: index, blocksLeftToday: later.length, release },
			trialsToday: this.#trialsToday,
			trialsLeftToday: later.reduce((sum, { trials }) => sum + trials, 0),
			gapHours: index === 0 && gap !== null ? Math.max(0, gap) : null,
			last: this.#last,
			...(this.#memory ? { memory: this.#memory } : {})
		};
	}

	#runOne(
		place: Place,
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

	#noteStop({ visit, index }: Place): null {
		this.#note('day-full', visit.number, [
			`After ${this.#trialsToday} trials the day is full: block ${index + 1} and what follows it cannot run.`,
			'Raise the trials a visit, or plan fewer trials on this day.'
		]);
		return null;
	}

	#noteWait({ visit, index }: Place): null {
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
