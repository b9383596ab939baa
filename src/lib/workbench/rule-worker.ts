import {
	runExample,
	runRuleJob,
	type ExampleStep,
	type RuleExperiment,
	type RuleJob,
	type RuleOutcome
} from '$scheduler/design/workbench/rule-experiment';
import type { WorkerAnswer } from './open-worker';

export type RuleRequest = { kind: 'measure' | 'example'; experiment: RuleExperiment; job: RuleJob };
export type RuleResult = RuleOutcome | ExampleStep[];

onmessage = ({ data }: MessageEvent<RuleRequest>) => {
	postMessage(answer(data));
};

function answer({ kind, experiment, job }: RuleRequest): WorkerAnswer<RuleResult> {
	try {
		const result = kind === 'measure' ? runRuleJob(experiment, job) : runExample(experiment, job);
		return { ok: true, result };
	} catch (error) {
		return { ok: false, message: error instanceof Error ? error.message : String(error) };
	}
}
