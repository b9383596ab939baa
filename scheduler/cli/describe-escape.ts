import { z } from 'zod';
import { describeEscapeCourse } from '../perturbations/escape-course.ts';
import { regionSchema } from '../perturbations/region-settings.ts';
import { createTask } from '../tasks/create-task.ts';
import { createScaledTask } from '../tasks/scaled-task.ts';
import { readableTaskSchema } from './trial-inputs.ts';

const trials = z.array(z.array(z.number()));

export const escapeInputSchema = z
	.strictObject({
		task: readableTaskSchema,
		region: regionSchema.describe('as a decision places it; center and shape scaled'),
		trials: trials.min(3).describe('under the region, in order, task units'),
		afterRemoval: trials.default([]).describe('plain trials once it was removed')
	})
	.superRefine(({ task, region, ...given }, context) => {
		const count = task.variables.length;
		const check = (path: string, lists: readonly number[][]) => {
			if (lists.every((list) => list.length === count)) return;
			const message = `each needs ${count} values`;
			context.addIssue({ code: 'custom', path: path.split('.'), message });
		};
		check('trials', given.trials);
		check('afterRemoval', given.afterRemoval);
		check('region.shape', [region.center, ...region.shape]);
	});

const share = z.strictObject({ share: z.number(), low: z.number(), high: z.number() });

export const escapeOutputSchema = z.union([
	z.strictObject({
		ok: z.literal(true),
		trialCount: z.number(),
		outside: share,
		solved: share,
		relative: z.number(),
		touchingScale: z.number(),
		overlap: z.number(),
		travel: z.number().nullable(),
		side: z.number(),
		reentry: share.nullable()
	}),
	z.strictObject({ ok: z.literal(false), reason: z.string() })
]);

/** Escape measures of trials in task units. */
export function describeEscape({
	task: record,
	region,
	...given
}: z.output<typeof escapeInputSchema>) {
	const task = createScaledTask(createTask(record));
	const executions = given.trials.map((trial) => task.toScaled(trial));
	const afterRemoval = given.afterRemoval.map((trial) => task.toScaled(trial));
	return describeEscapeCourse({ task, region, executions, afterRemoval });
}
