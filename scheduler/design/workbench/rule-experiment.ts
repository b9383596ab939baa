import { z } from 'zod';
import { redundantTraitsSchema } from '../../learners/redundant-traits.ts';
import type { Decision } from '../../policies/decision.ts';
import { policySettingsSchema, type PolicySettings } from '../../policies/policy-settings.ts';
import { createSeededStream } from '../../random/seeded-stream.ts';
import { measureSteadiness } from '../../simulation/selector-steadiness.ts';
import { measureShift } from '../../simulation/shift-characteristics.ts';
import { simulatePerson, type ObservedStep } from '../../simulation/simulate-person.ts';
import { createTask } from '../../tasks/create-task.ts';
import { taskRecordSchema } from '../../tasks/task-record.ts';
import type { Task } from '../../tasks/task.ts';
import { SWEEP_KEYS, sweepPolicy } from './rule-sweep.ts';

/** Model people of the workbench: how they explore and take back errors. Model people, not people. */
export const PEOPLE_KINDS = {
	exploring: {
		label: 'explore, adapt within twenty trials',
		traits: { exploration: 0.5, adaptation: { kind: 'single-rate', retention: 1, rate: 0.11 } }
	},
	slow: {
		label: 'explore, adapt slowly',
		traits: { exploration: 0.5, adaptation: { kind: 'single-rate', retention: 0.97, rate: 0.03 } }
	},
	rigid: {
		label: 'do not explore, adapt within twenty trials',
		traits: { exploration: 0.02, adaptation: { kind: 'single-rate', retention: 1, rate: 0.11 } }
	}
} as const;
export type PeopleKind = keyof typeof PEOPLE_KINDS;

const BODY = { motorAlong: 0.9, motorAcross: 0.35 };
/** Blocks of a person who does not change at all. */
const STEADY_BLOCKS = 16;
/** They cost little, so that each job brings several. */
const UNMOVED_PEOPLE = 20;

export const ruleExperimentSchema = z.strictObject({
	task: taskRecordSchema,
	policy: policySettingsSchema,
	sweep: z.enum(SWEEP_KEYS),
	values: z.array(z.number()).min(1).max(12),
	people: z.number().int().min(1).max(1000),
	kind: z.enum(['exploring', 'slow', 'rigid']),
	/** Lag-1 correlation of the trials of people who do not change. */
	lagOne: z.number().min(0).max(0.6),
	days: z.number().int().min(1).max(40),
	blocksPerDay: z.number().int().min(1).max(40),
	gapHours: z.number().positive(),
	seed: z.number().int().nonnegative()
});
export type RuleExperiment = z.output<typeof ruleExperimentSchema>;

/** One person under one value of the setting: the piece of work of one worker. */
export interface RuleJob {
	readonly value: number;
	readonly person: number;
}

export interface RuleOutcome extends RuleJob {
	/** A person without a true change: blocks after an offer, and those in which it became another. */
	readonly steady: { readonly blocks: number; readonly changed: number } | null;
	/** People who do not adapt at all, and those of them who passed the first step of a shift. */
	readonly unmoved: { readonly people: number; readonly passed: number } | null;
	/** Trials under regions until the first was left; null: it never was. */
	readonly escapeTrials: number | null;
	/** Trials under the shift until its goal was held; null: it never was. */
	readonly followTrials: number | null;
	readonly decisions: number;
	/** Decisions for which a person of the lab would have had to look. */
	readonly holds: number;
}

/**
 * One model person under the policy that would run, with one setting moved.
 *
 * Decision: the experiment and the person's number, so that the answer depends on nothing that runs beside
 *          it: streams are jumped by the number, and the same people meet every value.
 * Source:  method sheets D0 (Measured, Closed loop), D3 (table). Accuracy: rule-experiment.test.ts against
 *          CALIBRATION.md.
 */
export function runRuleJob(experiment: RuleExperiment, job: RuleJob): RuleOutcome {
	const task = createTask(experiment.task);
	const policy = sweepPolicy(experiment.policy, experiment.sweep, job.value);
	const course = followCourse(experiment, { task, policy, person: job.person });
	return {
		...job,
		steady: measureSteady(experiment, { task, policy, person: job.person }),
		unmoved: policy.aims.shift ? measureUnmoved(experiment, policy, job.person) : null,
		...course
	};
}

interface Setting {
	readonly task: Task;
	readonly policy: PolicySettings;
	readonly person: number;
}

/** Tasks of two variables alone have the plain picture of a cloud along a line. */
function measureSteady(
	{ lagOne, seed }: RuleExperiment,
	{ task, policy, person }: Setting
): RuleOutcome['steady'] {
	if (task.variables.length !== 2) return null;
	const { changedShare, blockCount } = measureSteadiness({
		...{ task, settings: policy, peopleCount: 1, blockCount: STEADY_BLOCKS, seed: seed + person },
		people: { along: 1, across: 0.35, wanderSd: 0, lagOne, change: null }
	});
	return { blocks: blockCount, changed: Math.round(changedShare * blockCount) };
}

function measureUnmoved(
	{ lagOne, seed }: RuleExperiment,
	{ shift }: PolicySettings,
	person: number
): RuleOutcome['unmoved'] {
	const { passedShare } = measureShift({
		...{ learner: { name: 'does not adapt', rates: null }, lagOne, peopleCount: UNMOVED_PEOPLE },
		...{ seed: seed + person * UNMOVED_PEOPLE, settings: shift.rule }
	});
	return { people: UNMOVED_PEOPLE, passed: Math.round(passedShare * UNMOVED_PEOPLE) };
}

function followCourse(experiment: RuleExperiment, setting: Setting) {
	const found = { escapeTrials: null, followTrials: null, decisions: 0, holds: 0 } as {
		escapeTrials: number | null;
		followTrials: number | null;
		decisions: number;
		holds: number;
	};
	runCourse(experiment, setting, ({ decision }) => {
		const { done } = decision.memory;
		found.decisions += 1;
		if (decision.kind === 'hold') found.holds += 1;
		if (done.escapes > 0) found.escapeTrials ??= done.region;
		if (done.held) found.followTrials ??= done.shift;
	});
	return found;
}

function runCourse(
	{ kind, seed, days, blocksPerDay, gapHours }: RuleExperiment,
	{ task, policy, person }: Setting,
	observe: (step: ObservedStep) => void
): void {
	simulatePerson({
		...{ task, settings: policy, days, blocksPerDay, gapHours, observe },
		traits: redundantTraitsSchema.parse({ ...BODY, ...PEOPLE_KINDS[kind].traits }),
		place: task.variables.map(() => 0),
		stream: createSeededStream(seed, person)
	});
}

/** One block of an example run. */
export interface ExampleStep {
	readonly day: number;
	readonly block: number;
	readonly decision: Decision;
	readonly trials: readonly (readonly number[])[];
	readonly hitShare: number | null;
	readonly meanError: number | null;
}

/** The same person once more, to step through block by block. */
export function runExample(experiment: RuleExperiment, job: RuleJob): ExampleStep[] {
	const task = createTask(experiment.task);
	const policy = sweepPolicy(experiment.policy, experiment.sweep, job.value);
	const steps: ExampleStep[] = [];
	runCourse(experiment, { task, policy, person: job.person }, ({ day, block, decision, ran }) => {
		const count = decision.parameters.trials ?? 0;
		steps.push({
			...{ day, block, decision, trials: ran?.last.trials ?? [] },
			hitShare: ran && count > 0 ? ran.hitCount / count : null,
			meanError: ran?.meanError ?? null
		});
	});
	return steps;
}
