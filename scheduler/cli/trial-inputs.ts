import { z } from 'zod';
import { createTask } from '../tasks/create-task.ts';
import { computeCost } from '../tasks/task.ts';
import { parseFormula } from '../tasks/formula/parse-formula.ts';
import { taskRecordSchema } from '../tasks/task-record.ts';

/** A task whose formula, if it has one, can be read. */
export const readableTaskSchema = taskRecordSchema.superRefine((record, context) => {
	if (record.type !== 'formula') return;
	const names = record.variables.map(({ name }) => name);
	const parsed = parseFormula(record.formula, names);
	if (parsed.ok) return;
	const message = `character ${parsed.position + 1}: ${parsed.message}`;
	context.addIssue({ code: 'custom', path: ['formula'], message });
});

/** A task and trials of it, in task units, one value for each variable. */
export const trialsInputSchema = z
	.strictObject({
		task: readableTaskSchema,
		trials: z.array(z.array(z.number())).min(1)
	})
	.superRefine(({ task, trials }, context) => {
		trials.forEach((trial, i) => {
			if (trial.length === task.variables.length) return;
			const message = `has ${trial.length} values, the task has ${task.variables.length} variables`;
			context.addIssue({ code: 'custom', path: ['trials', i], message });
		});
	});

export const outcomeSchema = z.strictObject({
	unit: z.string(),
	trialCount: z.int(),
	hitCount: z.int(),
	undefinedResultCount: z.int(),
	meanAbsoluteResult: z.number().nullable(),
	/** null: the task has no result there. */
	results: z.array(z.number().nullable()),
	hits: z.array(z.boolean()),
	/** Size of the miss that people are shown, with the penalty where the task has one. */
	costs: z.array(z.number().nullable()),
	/** Each signed result; for one result as without a penalty. */
	signed: z.array(z.array(z.number()).nullable()),
	/** Why a trial has no valid outcome; null: it has one. */
	invalid: z.array(z.string().nullable())
});

export type TrialsInput = z.output<typeof trialsInputSchema>;

/** Result and hit of each trial. */
export function computeOutcome({ task: record, trials }: TrialsInput) {
	const task = createTask(record);
	const results = trials.map((trial) => task.evaluate(trial));
	const defined = results.filter(Number.isFinite);
	const hits = results.map((result) => Math.abs(result) <= task.tolerance);
	const total = defined.reduce((sum, result) => sum + Math.abs(result), 0);
	return {
		unit: task.resultUnit,
		trialCount: trials.length,
		hitCount: hits.filter(Boolean).length,
		undefinedResultCount: trials.length - defined.length,
		meanAbsoluteResult:
			defined.length > 0 && Number.isFinite(total) ? total / defined.length : null,
		results: results.map((result) => (Number.isFinite(result) ? result : null)),
		hits,
		costs: trials.map((trial) => computeCost(task, trial)),
		signed: trials.map((trial) => finiteOrNull(task.results(trial))),
		invalid: trials.map((trial) => task.findInvalid(trial))
	};
}

function finiteOrNull(values: number[]): number[] | null {
	return values.every(Number.isFinite) ? values : null;
}
