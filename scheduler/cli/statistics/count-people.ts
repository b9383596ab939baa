import { z } from 'zod';
import { computePeopleToEnrol } from '../../power/required-n.ts';
import {
	computeDesignEffect,
	countInClusters,
	countReplicates
} from '../../power/sample-counts.ts';
import { levelSchema } from './finite.ts';

export const countsInputSchema = z.union([
	z.strictObject({
		effectiveCount: z.number().positive().describe('independent people that would do'),
		clusterSize: z.number().min(1),
		icc: z.number().min(0).max(1),
		sizeVariation: z.number().min(0).default(0)
	}),
	z.strictObject({
		completersNeeded: z.number().min(0),
		lossShare: z.number().min(0).lt(1)
	}),
	z.strictObject({
		p: z.number().min(0).max(1).describe('expected power or share'),
		halfWidth: z.number().positive(),
		level: levelSchema.default(0.95)
	})
]);

export const countsSchema = z.union([
	z.strictObject({ designEffect: z.number(), totalCount: z.number(), clusterCount: z.number() }),
	z.strictObject({ toEnrol: z.number() }),
	z.strictObject({ replicates: z.number() })
]);

/** People in clusters, people to enrol, or replicates of a simulation. */
export function countPeople(
	input: z.output<typeof countsInputSchema>
): z.output<typeof countsSchema> {
	if ('halfWidth' in input) return { replicates: countReplicates(input) };
	if ('lossShare' in input)
		return { toEnrol: computePeopleToEnrol(input.completersNeeded, input.lossShare) };
	const counts = countInClusters(input.effectiveCount, input);
	return { designEffect: computeDesignEffect(input), ...counts };
}
