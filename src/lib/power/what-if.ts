import { z } from 'zod';
import type { PowerAssumptions } from './power-report';

const optional = (schema: z.ZodNumber) =>
	z
		.union([z.literal('').transform(() => undefined), z.coerce.number().pipe(schema)])
		.optional()
		.catch(undefined);

/** Values to try in place of those of the plan, from the address; what cannot be read is left out. */
export const whatIfSchema = z.object({
	n: optional(z.number().int().min(2).max(5000)),
	d: optional(z.number().min(0.01).max(5)),
	alpha: optional(z.number().min(0.0001).max(0.5)),
	people: optional(z.number().min(0).max(95)),
	effect: optional(z.number().min(0).max(95))
});

export type WhatIf = z.infer<typeof whatIfSchema>;

/** The plan with what was asked put in its place; shares are asked for in percent. */
export function applyWhatIf(plan: PowerAssumptions, asked: WhatIf): PowerAssumptions {
	return {
		peoplePerArm: asked.n ?? plan.peoplePerArm,
		effectD: asked.d ?? plan.effectD,
		alpha: asked.alpha ?? plan.alpha,
		sides: plan.sides,
		peopleLostShare: asked.people === undefined ? plan.peopleLostShare : asked.people / 100,
		effectLostShare: asked.effect === undefined ? plan.effectLostShare : asked.effect / 100
	};
}
