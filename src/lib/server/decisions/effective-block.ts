import { z } from 'zod';
import { DECISION_KINDS } from '$scheduler/policies/policy-memory';

const planSchema = z.object({
	kind: z.enum(DECISION_KINDS),
	parameters: z.record(z.string(), z.unknown())
});
export type BlockPlanned = z.infer<typeof planSchema>;

type Decided = {
	state: 'automatic' | 'held' | 'settled' | 'fallback';
	output: string;
	settlement: { block: string } | null;
};

/** The block that a decision lets run: its own, or what it was settled to; null while it is held. */
export function findEffectiveBlock(decided: Decided): BlockPlanned | null {
	if (decided.settlement) return planSchema.parse(JSON.parse(decided.settlement.block));
	if (decided.state === 'held') return null;
	return planSchema.parse(JSON.parse(decided.output));
}

/** Plain practice of the declared length: what runs when nobody settled a held decision. */
export function planFallback(trials: number): BlockPlanned {
	return { kind: 'practice', parameters: { trials } };
}
