import { z } from 'zod';
import { failureSchema, intervalResultSchema, matrix, numbers } from './block-inputs.ts';
import { comparisonSchema } from './second-system.ts';

/** What stands beside every measure of the structure of a cloud. */
const beside = <Name extends string>(name: Name) => ({
	ok: z.literal(true),
	compared: z.literal(name).describe('the number with an interval and a second system'),
	/** null: not asked for, or fewer trials than a run. */
	interval: intervalResultSchema.nullable(),
	secondSystem: comparisonSchema
});

export const manifoldVarianceSchema = z.union([
	z.strictObject({
		...beside('logRatio'),
		...{ along: z.number(), across: z.number(), total: z.number() },
		...{ ratio: z.number(), logRatio: z.number(), index: z.number(), indexZ: z.number() }
	}),
	failureSchema
]);

export const alignmentSchema = z.union([
	z.strictObject({
		...beside('angleDeg'),
		...{ angleDeg: z.number(), majorAxis: numbers, eigenvalues: numbers },
		...{ eigenvalueRatio: z.number(), aspectRatio: z.number(), isMeaningful: z.boolean() }
	}),
	failureSchema
]);

const series = z.array(
	z.strictObject({
		/** null: too few trials or no spread. */
		...{ lagOne: z.number().nullable(), fluctuationExponent: z.number().nullable() }
	})
);

export const goalSchema = z.union([
	z.strictObject({
		...beside('alignmentFactor'),
		...{ goalCovariance: matrix, goalSd: z.number(), singularValues: numbers },
		...{ acrossSd: z.number(), totalSd: z.number(), alignmentFactor: z.number() },
		series: z.strictObject({ along: series, across: series }).nullable()
	}),
	failureSchema
]);
