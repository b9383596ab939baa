import { z } from 'zod';
import { readableTaskSchema } from '../trial-inputs.ts';
import { secondSystemSchema } from './second-system.ts';

export const numbers = z.array(z.number());
export const matrix = z.array(numbers);
export const trialsSchema = z.array(numbers).min(2);

/** Bootstrap of an interval; runs of five trials are drawn. */
export const intervalSchema = z.strictObject({
	level: z.number().gt(0).lt(1).default(0.95),
	replicates: z.int().min(0).max(100_000).default(400).describe('0: no interval'),
	blockLength: z.int().min(1).default(5),
	seed: z.int().default(1)
});

export type IntervalRequest = z.output<typeof intervalSchema>;

/** What commands on trials of a task take beside their own. */
export const measureNames = {
	task: readableTaskSchema,
	second: secondSystemSchema.optional(),
	interval: intervalSchema.prefault({})
};

export const failureSchema = z.strictObject({ ok: z.literal(false), reason: z.string() });

export const intervalResultSchema = z.union([
	z.strictObject({
		ok: z.literal(true),
		...{ value: z.number(), low: z.number(), high: z.number(), standardError: z.number() },
		...{ level: z.number(), replicateCount: z.int(), failedCount: z.int() }
	}),
	failureSchema
]);

/** Complains of a trial that does not have one value for each variable of the task. */
export function requireWidths(
	input: { task: { variables: readonly unknown[] } },
	blocks: Readonly<Record<string, readonly (readonly number[])[]>>,
	context: z.RefinementCtx
): void {
	const width = input.task.variables.length;
	for (const [name, trials] of Object.entries(blocks))
		trials.forEach((trial, i) => {
			if (trial.length === width) return;
			const message = `has ${trial.length} values, the task has ${width} variables`;
			context.addIssue({ code: 'custom', path: [name, i], message });
		});
}
