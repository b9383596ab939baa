import type { PlacementGround } from '../perturbations/prepare-placement.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import type { DecisionFacts } from './decision.ts';
import type { JsonObject } from './json-value.ts';
import type { BlockParameters, DecisionKind, ExecutedKind, PolicyMemory } from './policy-memory.ts';
import type { PolicySettings } from './policy-settings.ts';
import type { PolicyState } from './policy-state.ts';

/**
 * One call of the selector at work: `memory` and `facts` are its own copies and are filled on the way;
 * the inputs are never changed.
 */
export interface Turn {
	readonly state: PolicyState;
	readonly settings: PolicySettings;
	readonly task: ScaledTask;
	readonly memory: PolicyMemory;
	readonly facts: DecisionFacts;
	/** Trace and carried clouds of a placement, kept for the leaning one. */
	ground?: PlacementGround;
}

/** What a rung says when it decides. */
export interface Answer {
	readonly code: string;
	readonly kind: DecisionKind;
	readonly parameters?: BlockParameters;
	readonly values?: JsonObject;
}

/** Blocks without any perturbation: their trials show the person's own cloud. */
export function isPlain(kind: ExecutedKind): boolean {
	return ['baseline', 'practice', 'recovery', 'maintenance', 'probe'].includes(kind);
}

/** Plain blocks that belong to the learning curve. */
export function isOnCurve(kind: ExecutedKind): boolean {
	return isPlain(kind) && kind !== 'probe';
}
