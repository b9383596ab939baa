import { findTrialCountMin } from '../policies/gates.ts';
import {
	equaliseBlockLengths,
	policySettingsSchema,
	type PolicySettings
} from '../policies/policy-settings.ts';
import { DESIGN_LIMITS } from './design-limits.ts';
import type { Design, DesignArm } from './design.ts';

/** Where nothing is known of the task: the gates of two variables. */
const VARIABLES_UNKNOWN = 2;

/** Execution variables of the task, as far as it says. */
export function countVariables({ task }: Design): number {
	const { variables } = (task ?? {}) as { variables?: unknown };
	return Array.isArray(variables) && variables.length > 0 ? variables.length : VARIABLES_UNKNOWN;
}

/** Fewest trials that show one person's cloud in this task. */
export function findCloudTrials(design: Design): number {
	return findTrialCountMin(countVariables(design));
}

/** Whether the policy chooses blocks anywhere: an adaptive arm that has adaptive time. */
export function isPolicyAtWork(design: Design): boolean {
	return design.arms.some((arm) => arm.rule === 'adaptive' && hasAdaptiveTime(design, arm));
}

function hasAdaptiveTime({ visits }: Design, { key }: DesignArm): boolean {
	return visits.some(({ blocks, armBlocks }) =>
		(armBlocks[key] ?? blocks).some(({ purpose }) => purpose === 'adaptive')
	);
}

/** The policy as it will run: one length of block, defaults where nothing is said; null: not readable. */
export function readPolicy(design: Design): PolicySettings | null {
	const parsed = policySettingsSchema.safeParse(design.policy);
	return parsed.success ? equaliseBlockLengths(parsed.data) : null;
}

/** Fewest trials of a block of adaptive time for the policy to decide anything by it. */
export function findDecisionTrials(design: Design, policy: PolicySettings | null): number {
	const plain = policy?.aims.shift
		? Math.ceil(policy.shift.minPlain / DESIGN_LIMITS.plainBlocks)
		: 0;
	return Math.max(findCloudTrials(design), plain);
}
