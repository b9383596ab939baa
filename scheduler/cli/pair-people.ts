import { z } from 'zod';
import {
	computeMatchScales,
	describeBaseline,
	pairInOrder,
	type Candidate
} from '../policies/yoking/match-people.ts';
import { createTask } from '../tasks/create-task.ts';
import { createScaledTask, type ScaledTask } from '../tasks/scaled-task.ts';
import { computeCovariance, computeMean } from '../variability/moments.ts';
import { readableTaskSchema } from './trial-inputs.ts';

const personSchema = z.strictObject({
	code: z.string().min(1),
	trials: z.array(z.array(z.number())).min(3).describe('baseline trials in task units')
});

export const yokeInputSchema = z
	.strictObject({
		task: readableTaskSchema,
		masters: z.array(personSchema).min(1),
		partners: z.array(personSchema).min(1).describe('in the order of arrival'),
		paired: z.array(z.strictObject({ partner: z.string(), master: z.string() })).default([]),
		scales: z
			.strictObject({ logVolumeSd: z.number().positive(), meanErrorSd: z.number().positive() })
			.nullable()
			.default(null)
			.describe('as frozen at the first pairing; null: from these baselines')
	})
	.superRefine(({ task, masters, partners }, context) => {
		const count = task.variables.length;
		for (const [group, people] of Object.entries({ masters, partners }))
			people.forEach(({ trials }, i) => {
				if (trials.every((trial) => trial.length === count)) return;
				const message = `each trial needs ${count} values`;
				context.addIssue({ code: 'custom', path: [group, i, 'trials'], message });
			});
	});

const rungSchema = z.strictObject({ code: z.string(), distance: z.number() });
export const yokeOutputSchema = z.strictObject({
	scales: z.strictObject({ logVolumeSd: z.number(), meanErrorSd: z.number() }),
	pairs: z.array(
		z.strictObject({
			...{ partner: z.string(), master: z.string(), distance: z.number() },
			ladder: z.array(rungSchema)
		})
	),
	unpaired: z.array(z.string())
});

/** Yoked pairs from baselines: nearest by volume and error, ties by code. */
export function pairPeople(input: z.output<typeof yokeInputSchema>) {
	const task = createScaledTask(createTask(input.task));
	const masters = input.masters.map((person) => readCandidate(task, person));
	const partners = input.partners.map((person) => readCandidate(task, person));
	const traits = [...masters, ...partners].map((candidate) => candidate.traits);
	const scales = input.scales ?? computeMatchScales(traits);
	return { scales, ...pairInOrder({ partners, masters, scales, paired: input.paired }) };
}

function readCandidate(
	task: ScaledTask,
	{ code, trials }: z.output<typeof personSchema>
): Candidate {
	const executions = trials.map((trial) => task.toScaled(trial));
	const meanError = computeMean(executions.map((z) => Math.abs(task.evaluate(z))));
	const found = describeBaseline({ covariance: computeCovariance(executions), meanError });
	if (!found.ok) throw new RangeError(`${code}: the baseline does not spread in every direction`);
	return { code, traits: found.traits };
}
