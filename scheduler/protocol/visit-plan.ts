import { z } from 'zod';
import { blockPlanSchema, type BlockPlan } from './block-plan.ts';
import { hours } from './hours.ts';

export const gapRuleSchema = z
	.object({
		minHours: hours,
		targetHours: hours,
		maxHours: hours,
		nightsBetween: z.number().int().min(0).max(60)
	})
	.refine((gap) => gap.minHours <= gap.targetHours && gap.targetHours <= gap.maxHours, {
		message: 'Hours must rise: shortest, wanted, longest'
	});

const blocksSchema = z.array(blockPlanSchema).min(1).max(40);

export const visitPlanSchema = z.object({
	number: z.number().int().min(1),
	label: z.string().min(1).max(40),
	kind: z.enum(['baseline', 'practice', 'retention']),
	minutes: z.number().int().min(5).max(600),
	setupMinutes: z.number().int().min(0).max(240),
	cleanupMinutes: z.number().int().min(0).max(240),
	/** Hours since the visit before; null for the first visit. */
	gapBefore: gapRuleSchema.nullable(),
	/** The blocks of every arm without a list of its own. */
	blocks: blocksSchema,
	/** Lists of single arms, by their key. */
	armBlocks: z.record(z.string(), blocksSchema).optional()
});

export type VisitPlan = z.infer<typeof visitPlanSchema>;
export type GapRule = z.infer<typeof gapRuleSchema>;

type WithBlocks<Block> = {
	blocks: readonly Block[];
	armBlocks?: Readonly<Record<string, readonly Block[]>> | undefined;
};

/** The blocks that people of an arm run in a visit; those of every arm while the arm is not known. */
export function blocksOfArm<Block = BlockPlan>(
	visit: WithBlocks<Block>,
	armKey: string | null
): readonly Block[] {
	return (armKey === null ? undefined : visit.armBlocks?.[armKey]) ?? visit.blocks;
}
