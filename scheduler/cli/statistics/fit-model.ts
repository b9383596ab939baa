import { z } from 'zod';
import { fitFormula } from '../../analysis/mixed-model/fit-formula.ts';
import { intervalSchema, levelSchema, refusedSchema } from './finite.ts';

export const modelInputSchema = z
	.strictObject({
		formula: z.string().min(3).describe('such as y ~ day * arm + (1 + day | person)'),
		data: z
			.record(z.string(), z.array(z.union([z.number(), z.string()])))
			.describe('columns by name, all of one length; text for arms and people'),
		method: z.enum(['REML', 'ML']).default('REML'),
		level: levelSchema.default(0.95)
	})
	.superRefine(({ data }, context) => {
		const [first, ...rest] = Object.entries(data);
		if (!first) context.addIssue({ code: 'custom', path: ['data'], message: 'has no column' });
		for (const [name, values] of rest)
			if (values.length !== first?.[1].length)
				context.addIssue({
					...{ code: 'custom', path: ['data', name] },
					message: `has ${values.length} values, “${first?.[0]}” has ${first?.[1].length}`
				});
	});

const judged = { df: z.number(), t: z.number(), p: z.number() };
const effectSchema = z.strictObject({
	name: z.string(),
	estimate: z.number(),
	standardError: z.number(),
	satterthwaite: z.strictObject({ ...judged, interval: intervalSchema }),
	kenwardRoger: z.strictObject({ standardError: z.number(), ...judged }).nullable()
});

export const modelSchema = z.union([
	z.strictObject({
		ok: z.literal(true),
		method: z.enum(['REML', 'ML']),
		fixedEffects: z.array(effectSchema),
		random: z.strictObject({
			names: z.array(z.string()),
			sds: z.array(z.number()),
			correlation: z.number().nullable(),
			covariance: z.array(z.number()).describe('11, or 11, 12, 22')
		}),
		residualSd: z.number(),
		criterion: z.number().describe('-2 log likelihood, restricted or full'),
		...{ logLikelihood: z.number(), aic: z.number(), bic: z.number() },
		isSingular: z
			.boolean()
			.describe('a variance at 0 or a correlation at 1: usual with few people'),
		groups: z.array(z.strictObject({ name: z.string(), effects: z.array(z.number()) })),
		counts: z.looseObject({ rows: z.number(), groups: z.number() })
	}),
	refusedSchema
]);

/** A linear mixed model of columns. */
export function fitModel(input: z.output<typeof modelInputSchema>): z.output<typeof modelSchema> {
	const model = fitFormula(input);
	if (!model.ok) return model;
	const { fit, fixedEffects, randomNames, groups } = model;
	const { method, residualSd, criterion, logLikelihood, aic, bic, isSingular, counts } = fit;
	return {
		...{ ok: true, method, fixedEffects, residualSd, criterion, logLikelihood, aic, bic },
		random: {
			...{ names: randomNames, sds: fit.randomSds, correlation: fit.randomCorrelation },
			covariance: fit.randomCovariance
		},
		...{ isSingular, counts },
		groups: groups.map((name, i) => ({ name, effects: fit.predictedEffects[i] ?? [] }))
	};
}
