import type { EscapeStatistics } from '../perturbations/escape-statistics.ts';
import type { PlacementRung } from '../perturbations/weigh-share.ts';
import type { ShiftLogEntry } from '../perturbations/target-shift.ts';
import type { BandFacts } from './change-level.ts';
import type { GateStatistics } from './gates.ts';
import type { JsonObject } from './json-value.ts';
import type { AimName, BlockParameters, DecisionKind, PolicyMemory } from './policy-memory.ts';
import type { SettleFacts } from './settle-verdict.ts';

/** The rungs of the selector's ladder, in the order in which they are asked (method sheet D0). */
export const RUNGS = [
	'limits',
	'person',
	'recovery',
	'obligations',
	'data',
	'target',
	'running',
	'goals',
	'settle',
	'cool-down',
	'unchanged',
	'challenge',
	'lean',
	'practice'
] as const;
export type Rung = (typeof RUNGS)[number];

/** Why: the rung that answered, or a fact that came with the block; numbers stand in `values`. */
export interface Reason {
	readonly rung: Rung | 'block-end' | 'plan' | 'yoked';
	readonly code: string;
	readonly values: JsonObject;
}

/** One rung asked; code null: it had nothing to say. */
export interface LadderStep {
	readonly rung: Rung | 'plan' | 'yoked';
	readonly code: string | null;
}

export interface AimFacts {
	/** Trials by which each aim lacks its share. */
	readonly lack: Partial<Record<AimName, number>>;
	/** Why an aim cannot be worked on now. */
	readonly refused: Partial<Record<AimName, string>>;
}

export interface CloudGeometry {
	/** Angle between the cloud's major axis and the manifold; null: no tangent. */
	readonly alignmentDeg: number | null;
	readonly eigenvalueRatio: number;
	/** SD along the manifold, scaled; null: not one direction. */
	readonly sdTangent: number | null;
}

/** Numbers that were computed on the way; each only where its step was reached. */
export interface DecisionFacts {
	gates?: GateFacts;
	escape?: EscapeStatistics;
	/** Code of what ended with the block. */
	ended?: string;
	follow?: FollowFacts;
	band?: BandFacts;
	settle?: SettleFacts;
	geometry?: CloudGeometry;
	/** Every share weighed, with the exits found and why it was refused. */
	place?: PlacementRung[];
	lean?: PlacementRung[];
	aims?: AimFacts;
}

export interface GateFacts extends GateStatistics {
	codes: string[];
	n?: number;
	/** Trials left out because the task gives them no result. */
	undefinedResultCount?: number;
	modeShare?: number;
	driftSd?: number;
}

export interface FollowFacts {
	readonly level: number;
	readonly passed: number;
	readonly stalls: number;
	readonly status: string;
	readonly log: readonly ShiftLogEntry[];
}

/** What the selector answers. `memory` goes into the next call; `reasons[0]` is the deciding one. */
export interface Decision {
	readonly kind: DecisionKind;
	readonly parameters: BlockParameters;
	readonly reasons: readonly Reason[];
	readonly ladder: readonly LadderStep[];
	readonly facts: DecisionFacts;
	readonly memory: PolicyMemory;
}
