import {
	restRedundantPerson,
	startRedundantPerson,
	type RedundantState
} from '../learners/redundant-person.ts';
import type { RedundantTraits } from '../learners/redundant-traits.ts';
import { chooseForTask } from '../policies/choose-next-block.ts';
import type { Decision } from '../policies/decision.ts';
import { createEmptyMemory, type PolicyMemory } from '../policies/policy-memory.ts';
import type { PolicySettings } from '../policies/policy-settings.ts';
import { policyStateSchema, type LastBlock } from '../policies/policy-state.ts';
import type { Uint32Stream } from '../random/random-stream.ts';
import { createScaledTask, type ScaledTask } from '../tasks/scaled-task.ts';
import type { Task } from '../tasks/task.ts';
import { findRunnable, runBlock, type RunResult } from './run-block.ts';

export interface SimulatedDecision {
	readonly day: number;
	readonly block: number;
	readonly kind: Decision['kind'];
	readonly code: string;
	/** Of the block that ran; null: none ran. */
	readonly hitShare: number | null;
	readonly meanError: number | null;
}

export interface SimulatedPerson {
	readonly decisions: readonly SimulatedDecision[];
	readonly done: PolicyMemory['done'];
	/** Distance of the last aim from the first, scaled. */
	readonly distance: number;
	readonly trialCount: number;
}

export interface SimulatePersonOptions {
	readonly task: Task;
	readonly settings: PolicySettings;
	readonly traits: RedundantTraits;
	readonly place: readonly number[];
	readonly stream: Uint32Stream;
	readonly days: number;
	readonly blocksPerDay: number;
	readonly gapHours: number;
	/** Called after every decision: to step through a run. */
	readonly observe?: (step: ObservedStep) => void;
}

/** One decision of a run, and the block that it let run; null: none ran. */
export interface ObservedStep {
	readonly day: number;
	readonly block: number;
	readonly decision: Decision;
	readonly ran: RunResult | null;
}

/** A rest, or a person who looked: how often one place in the day may be asked again. */
const ASKS_MAX = 3;

/**
 * One person of a study under the policy that would run it: every block is chosen by the selector, run by
 * a model learner and given back, over real hours between days. A person who is asked to look releases the
 * case at once.
 *
 * Decision: traits, task, policy and the stream; the same stream gives the same person.
 * Source:  method sheet D0 (Closed loop).
 */
export function simulatePerson(options: SimulatePersonOptions): SimulatedPerson {
	const task = createScaledTask(options.task);
	const start = startRedundantPerson(task, options.place);
	const run: Course = {
		task,
		state: start,
		memory: createEmptyMemory(),
		last: null,
		decisions: []
	};
	for (let day = 0; day < options.days; day++) {
		if (day > 0) run.state = restRedundantPerson(options.traits, run.state, options.gapHours);
		runDay(options, run, day);
	}
	const { aim, trialCount } = run.state;
	const distance = Math.hypot(...aim.map((value, i) => value - (start.aim[i] ?? 0)));
	return { decisions: run.decisions, done: run.memory.done, distance, trialCount };
}

interface Course {
	readonly task: ScaledTask;
	state: RedundantState;
	memory: PolicyMemory;
	last: LastBlock | null;
	decisions: SimulatedDecision[];
}

function runDay(options: SimulatePersonOptions, run: Course, day: number): void {
	const { blocksPerDay, settings } = options;
	let trialsToday = 0;
	for (let block = 0; block < blocksPerDay; block++) {
		const left = blocksPerDay - block;
		const asked = { day, block, left, trialsToday };
		for (let ask = 0; ask < ASKS_MAX; ask++) {
			const decision = decide(options, run, { ...asked, isReleased: ask > 0 });
			const runnable = findRunnable(decision);
			if (decision.kind === 'stop' || !runnable || runnable.kind === 'rest') {
				note(run, asked, decision, null);
				options.observe?.({ day, block, decision, ran: null });
				if (decision.kind === 'stop') return;
				continue;
			}
			const ran = runBlock({
				...{ task: run.task, traits: options.traits, state: run.state },
				...{ stream: options.stream, leftToday: (left - 1) * settings.blockTrials, ...runnable }
			});
			trialsToday += runnable.parameters.trials ?? 0;
			run.state = ran.state;
			run.last = ran.last;
			note(run, asked, decision, {
				hitShare: ran.hitCount / Math.max(1, runnable.parameters.trials ?? 0),
				meanError: ran.meanError
			});
			options.observe?.({ day, block, decision, ran });
			break;
		}
	}
}

interface Asked {
	readonly day: number;
	readonly block: number;
	readonly left: number;
	readonly trialsToday: number;
}

function decide(
	{ task, settings, gapHours }: SimulatePersonOptions,
	run: Course,
	{ day, block, left, trialsToday, isReleased }: Asked & { isReleased: boolean }
): Decision {
	const state = policyStateSchema.parse({
		...{ day, blockInDay: block, blocksLeftToday: left, trialsToday, release: isReleased },
		trialsLeftToday: left * settings.blockTrials,
		gapHours: day > 0 && block === 0 ? gapHours : null,
		...{ last: run.last, memory: run.memory }
	});
	const decision = chooseForTask({ state, settings, task });
	run.memory = decision.memory;
	run.last = null;
	return decision;
}

function note(
	run: Course,
	{ day, block }: Asked,
	{ kind, reasons }: Decision,
	ran: { hitShare: number; meanError: number } | null
): void {
	const code = reasons[0]?.code ?? '';
	const shown = ran ?? { hitShare: null, meanError: null };
	run.decisions.push({ day, block, kind, code, ...shown });
}
