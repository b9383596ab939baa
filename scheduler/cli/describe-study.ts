import { z } from 'zod';
import { simulateStudy } from '../simulation/simulate-study.ts';
import { studySettingsSchema } from '../simulation/simulation-settings.ts';
import { readableTaskSchema } from './trial-inputs.ts';

export const studyInputSchema = z.strictObject({
	...studySettingsSchema.shape,
	task: readableTaskSchema,
	/** Whether every decision of every person is listed. */
	withPeople: z.boolean().default(false)
});

const share = z.number().min(0).max(1);
const error = z.number().nullable();

export const studyOutputSchema = z.strictObject({
	groups: z.array(
		z.strictObject({
			name: z.string(),
			kindShares: z.record(z.string(), share),
			sequences: z.array(z.string()).describe('one letter a decision, one text a person'),
			escapesMean: z.number(),
			heldShare: share,
			frozenShare: share,
			firstError: error,
			lastError: error
		})
	),
	people: z.array(z.looseObject({ group: z.string() })).optional()
});

/** A simulated study, with or without its people. */
export function describeStudy({ withPeople, ...settings }: z.output<typeof studyInputSchema>) {
	const { groups, people } = simulateStudy(settings);
	return withPeople ? { groups, people } : { groups };
}
