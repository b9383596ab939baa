import { z } from 'zod';
import { shiftRuleSchema, shiftStateSchema } from '../perturbations/shift-rule.ts';
import { TargetShift } from '../perturbations/target-shift.ts';

export const shiftStepInputSchema = z
	.strictObject({
		rule: shiftRuleSchema,
		state: shiftStateSchema.nullable().default(null).describe('null: before the first trial'),
		/** Share kept over a gap before these trials; null: no gap. */
		retained: z.number().min(0).max(1).nullable().default(null),
		errors: z.array(z.number()).describe('target less result, one a trial, of one block'),
		hits: z.array(z.boolean()).nullable().default(null),
		leftToday: z
			.number()
			.int()
			.nonnegative()
			.nullable()
			.default(null)
			.describe('trials left in the day after these; null: unknown')
	})
	.refine(({ errors, hits }) => hits === null || hits.length === errors.length, {
		error: 'one hit for each error',
		path: ['hits']
	});

export const shiftStepOutputSchema = z.strictObject({
	levels: z.array(z.number()).describe('level shown at each trial'),
	next: z.number().describe('level of the next trial'),
	state: shiftStateSchema,
	log: z.array(z.looseObject({ trial: z.number(), action: z.string(), rule: z.string() }))
});

/** The levels that a target shift takes over the trials of one block. */
export function runShift(input: z.output<typeof shiftStepInputSchema>) {
	const { rule, state, errors, hits, leftToday, retained } = input;
	const shift = new TargetShift(rule, state);
	if (retained !== null) shift.resume(retained);
	const levels = errors.map((error, i) => {
		const { level } = shift;
		const after = errors.length - 1 - i;
		shift.observe({
			...{ error, hit: hits?.[i] ?? null, isLastOfBlock: after === 0 },
			leftToday: leftToday === null ? null : leftToday + after
		});
		return level;
	});
	return { levels, next: shift.level, state: shift.dump(), log: shift.log };
}
