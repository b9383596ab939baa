import {
	runRedundantTrial,
	type RedundantState,
	type TrialConditions
} from '../learners/redundant-person.ts';
import type { RedundantTraits } from '../learners/redundant-traits.ts';
import { createRegionTest } from '../perturbations/escape-statistics.ts';
import { TargetShift } from '../perturbations/target-shift.ts';
import type { Decision } from '../policies/decision.ts';
import type { BlockParameters, ExecutedKind } from '../policies/policy-memory.ts';
import type { LastBlock } from '../policies/policy-state.ts';
import { drawNormal, type Uint32Stream } from '../random/random-stream.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';

export interface RunRequest {
	readonly task: ScaledTask;
	readonly traits: RedundantTraits;
	readonly state: RedundantState;
	readonly stream: Uint32Stream;
	readonly kind: ExecutedKind;
	readonly parameters: BlockParameters;
	/** Trials left in the day after this block. */
	readonly leftToday: number | null;
}

export interface RunResult {
	/** As a rig returns it. */
	readonly last: LastBlock;
	readonly state: RedundantState;
	readonly hitCount: number;
	readonly meanError: number;
}

/**
 * Runs a decided block on a model learner, as a rig would: a region penalizes, a shift runs its rule trial
 * by trial (the same object as live and in replay) or takes a master's course, a clamp shows what it shows.
 *
 * Source:  method sheet D0 to D3, D5.
 */
export function runBlock(request: RunRequest): RunResult {
	const { task, traits, stream, kind, parameters, leftToday } = request;
	const trialCount = parameters.trials ?? 0;
	const rule = kind === 'shift' && !parameters.levels ? parameters.rule : undefined;
	const shift = rule ? new TargetShift(rule, parameters.state ?? null) : null;
	const trials: number[][] = [];
	const [errors, hits, levels]: [number[], boolean[], number[]] = [[], [], []];
	let { state } = request;
	const isPenalized = parameters.region ? createRegionTest(parameters.region) : () => false;
	for (let trial = 0; trial < trialCount; trial++) {
		const level = shift?.level ?? findLevel(parameters, trial);
		const conditions: TrialConditions = {
			...{ shift: level, isPenalized, feedback: findFeedback(parameters, stream) }
		};
		const ran = runRedundantTrial({ task, traits, state, conditions, stream });
		({ state } = ran);
		const { z, error, hit } = ran.outcome;
		trials.push(task.toUnits(z));
		errors.push(error);
		hits.push(hit);
		levels.push(level);
		const after = trialCount - 1 - trial;
		shift?.observe({
			...{ error, hit, isLastOfBlock: after === 0 },
			leftToday: leftToday === null ? null : leftToday + after
		});
	}
	const isShift = kind === 'shift';
	return {
		state,
		hitCount: hits.filter(Boolean).length,
		meanError: errors.reduce((sum, error) => sum + Math.abs(error), 0) / Math.max(1, trialCount),
		last: {
			...{ kind, leftToday, region: parameters.region ?? null, rule: rule ?? null },
			trials: isShift ? [] : trials,
			...(isShift ? { errors, hits, levels } : { errors: [], hits: null, levels: null })
		}
	};
}

/** Level of a block without a rule of its own. */
function findLevel({ levels, level, targetOffset }: BlockParameters, trial: number): number {
	return levels?.[trial] ?? level ?? targetOffset ?? 0;
}

function findFeedback(
	{ feedback, clampSd = 0 }: BlockParameters,
	stream: Uint32Stream
): TrialConditions['feedback'] {
	if (feedback === 'hidden') return 'hidden';
	if (feedback === 'clamped-to-zero') return 0;
	if (feedback === 'clamped-to-noise') return clampSd * drawNormal(stream);
	return 'shown';
}

/** What a decision lets run: its own block, a hold's fallback, or nothing. */
export function findRunnable({ kind, parameters }: Decision): {
	kind: ExecutedKind;
	parameters: BlockParameters;
} | null {
	if (kind === 'hold' && parameters.fallback) {
		const { kind: fallback, trials } = parameters.fallback;
		return { kind: fallback, parameters: { trials } };
	}
	if (kind === 'hold' || kind === 'stop' || kind === 'wait') return null;
	return { kind, parameters };
}
