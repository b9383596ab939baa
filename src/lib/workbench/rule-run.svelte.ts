import {
	ruleExperimentSchema,
	type ExampleStep,
	type PeopleKind,
	type RuleExperiment,
	type RuleJob,
	type RuleOutcome
} from '$scheduler/design/workbench/rule-experiment';
import { listSweepValues, type SweepKey } from '$scheduler/design/workbench/rule-sweep';
import { summariseRule } from '$scheduler/design/workbench/summarise-rule';
import { policySettingsSchema } from '$scheduler/policies/policy-settings';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { blocksOfArm } from '$scheduler/protocol/visit-plan';
import { keepOutcomes, loadOutcomes } from './kept-outcomes';
import { openWorker } from './open-worker';
import { runJobs, type JobRunner } from './run-jobs';
import type { RuleRequest, RuleResult } from './rule-worker';

/** What is asked of the workbench. */
export type RuleQuestion = {
	sweep: SweepKey;
	kind: PeopleKind;
	people: number;
	lagOne: number;
	seed: number;
};

const KEPT_EVERY = 5;
const WORKERS_MAX = 8;

/** The experiment that answers a question about a protocol's own rule, task and days. */
export function describeExperiment(
	{ task, policy, arms, visits }: ProtocolContent,
	question: RuleQuestion
): RuleExperiment {
	const adaptive = arms.find(({ rule }) => rule === 'adaptive')?.key ?? null;
	const days = visits
		.map((visit) => blocksOfArm(visit, adaptive).filter(({ purpose }) => purpose === 'adaptive'))
		.filter((blocks) => blocks.length > 0);
	const settings = policySettingsSchema.parse(policy);
	const gap = visits.find(({ kind, number }) => kind === 'practice' && number > 2)?.gapBefore;
	return ruleExperimentSchema.parse({
		...question,
		...{ task, policy: settings, values: listSweepValues(settings, question.sweep) },
		days: Math.max(1, days.length),
		blocksPerDay: Math.max(1, ...days.map((blocks) => blocks.length)),
		gapHours: gap?.targetHours ?? 23
	});
}

/** A run of the workbench: goes on where it was stopped, keeps every outcome in this browser. */
export class RuleRun {
	experiment = $state.raw<RuleExperiment | null>(null);
	outcomes = $state.raw<readonly RuleOutcome[]>([]);
	isRunning = $state(false);
	failure = $state('');
	workers = $state(0);
	#off: AbortController | null = null;

	readonly total = $derived(
		this.experiment ? this.experiment.values.length * this.experiment.people : 0
	);
	readonly points = $derived.by(() => {
		if (!this.experiment) return [];
		const { aims } = this.experiment.policy;
		const has = { region: aims.region !== undefined, shift: aims.shift !== undefined };
		return summariseRule(this.experiment.values, this.outcomes, has);
	});

	async start(experiment: RuleExperiment): Promise<void> {
		this.stop();
		const off = new AbortController();
		this.#off = off;
		this.failure = '';
		this.experiment = experiment;
		const kept = await loadOutcomes(localStorage, experiment);
		this.outcomes = kept.filter((outcome) => isAsked(experiment, outcome));
		const known = new Set(this.outcomes.map(nameJob));
		const jobs = listJobs(experiment).filter((job) => !known.has(nameJob(job)));
		this.isRunning = true;
		this.workers = Math.min(WORKERS_MAX, Math.max(1, navigator.hardwareConcurrency ?? 2));
		try {
			await runJobs({
				...{ jobs, count: this.workers, signal: off.signal },
				open: () => openRunner(experiment),
				onResult: (outcome) => this.#take(experiment, outcome)
			});
		} catch (error) {
			this.failure = error instanceof Error ? error.message : String(error);
		}
		await keepOutcomes(localStorage, experiment, this.outcomes);
		if (this.#off === off) this.isRunning = false;
	}

	/** What was done stays; the same question goes on from there. */
	stop(): void {
		this.#off?.abort();
		this.isRunning = false;
	}

	#take(experiment: RuleExperiment, outcome: RuleOutcome): void {
		this.outcomes = [...this.outcomes, outcome];
		if (this.outcomes.length % KEPT_EVERY === 0) {
			void keepOutcomes(localStorage, experiment, this.outcomes);
		}
	}
}

/** Person by person over all values, so that curves are whole from the first people on. */
function listJobs({ values, people }: RuleExperiment): RuleJob[] {
	return Array.from({ length: people }, (_, person) =>
		values.map((value) => ({ value, person }))
	).flat();
}

function isAsked({ values, people }: RuleExperiment, { value, person }: RuleJob): boolean {
	return person < people && values.includes(value);
}

const nameJob = ({ value, person }: RuleJob) => `${value} ${person}`;

function openRunner(experiment: RuleExperiment): JobRunner<RuleJob, RuleOutcome> {
	const runner = openRuleWorker();
	return {
		run: async (job) => (await runner.run({ kind: 'measure', experiment, job })) as RuleOutcome,
		stop: () => runner.stop()
	};
}

/** One person block by block, in a worker of its own. */
export async function loadExample(
	experiment: RuleExperiment,
	job: RuleJob
): Promise<ExampleStep[]> {
	const runner = openRuleWorker();
	try {
		return (await runner.run({ kind: 'example', experiment, job })) as ExampleStep[];
	} finally {
		runner.stop();
	}
}

function openRuleWorker(): JobRunner<RuleRequest, RuleResult> {
	return openWorker(new Worker(new URL('./rule-worker.ts', import.meta.url), { type: 'module' }));
}
