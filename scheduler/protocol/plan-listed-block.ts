import { entry } from '../linear-algebra/vector.ts';
import type { BlockParameters, BlockSummary, ExecutedKind } from '../policies/policy-memory.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import { computeMassInside } from '../variability/mass-inside.ts';
import type { BlockPlan, FixedRegion, FixedShift } from './block-plan.ts';

/** A block as the rule of a fixed arm takes it. */
export type ListedBlock = { kind: ExecutedKind; parameters: BlockParameters };

/** Assumed of a region while nothing is known of the person's cloud. */
const SHARE_UNKNOWN = 0.5;
/** A share is a ratio strictly between 0 and 1. */
const SHARE_EDGE = 0.001;

/**
 * The block that a protocol lists, with everything a rig needs to run it.
 *
 * Shapes:  cloud.mean (d), cloud.cov (d × d), scaled; null: no plain block yet.
 * Method:  adaptive time of an arm without the policy is plain practice. A listed region lies at the same
 *          place for everybody; the share it catches is the mass of the person's own cloud inside it, and
 *          what is left of that leaks. A listed shift moves in even steps from trial to trial.
 * @throws {RangeError} for a rest, which has no trials
 */
export function planListedBlock(
	plan: BlockPlan,
	{ task, cloud }: { task: ScaledTask; cloud: Pick<BlockSummary, 'mean' | 'cov'> | null }
): ListedBlock {
	const { purpose, trials } = plan;
	if (purpose === 'rest') throw new RangeError('a rest has no trials to plan');
	return {
		kind: purpose === 'adaptive' ? 'practice' : purpose,
		parameters: {
			trials,
			...(plan.feedback ? { feedback: plan.feedback } : {}),
			...(plan.targetOffset === undefined ? {} : { targetOffset: plan.targetOffset }),
			...(plan.region ? { region: placeRegion(plan.region, task, cloud) } : {}),
			...(plan.shift ? { levels: listLevels(plan.shift, trials) } : {})
		}
	};
}

function placeRegion(
	{ center, halfWidth }: FixedRegion,
	task: ScaledTask,
	cloud: Pick<BlockSummary, 'mean' | 'cov'> | null
): NonNullable<BlockParameters['region']> {
	const scaled = task.toScaled(center);
	// Half widths are distances: the origin of the axes drops out.
	const edge = task.toScaled(center.map((value, i) => value + entry(halfWidth, i)));
	const shape = scaled.map((from, i) =>
		scaled.map((_, j) => (i === j ? (entry(edge, i) - from) ** 2 : 0))
	);
	const share = cloud ? findShare(cloud, { center: scaled, shape }) : SHARE_UNKNOWN;
	return { center: scaled, shape, share, stay: 1 - share, centerInUnits: [...center] };
}

function findShare(
	{ mean, cov }: Pick<BlockSummary, 'mean' | 'cov'>,
	{ center, shape }: { center: number[]; shape: number[][] }
): number {
	const mass = computeMassInside({ mean, covariance: cov, center, shape });
	if (!mass.ok) return SHARE_UNKNOWN;
	return Math.min(1 - SHARE_EDGE, Math.max(SHARE_EDGE, mass.probability));
}

/** Level of the target in each trial, in the unit of the result. */
function listLevels({ from, to }: FixedShift, trials: number): number[] {
	return Array.from(
		{ length: trials },
		(_, index) => from + ((to - from) * index) / Math.max(1, trials - 1)
	);
}
