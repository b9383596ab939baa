import { z } from 'zod';
import { computeMassInside } from '../../variability/mass-inside.ts';
import { failureSchema, matrix, numbers } from './block-inputs.ts';

export const massInputSchema = z
	.strictObject({
		cloud: z.strictObject({ mean: numbers.min(1), covariance: matrix }),
		region: z
			.strictObject({ center: numbers, shape: matrix })
			.describe('(x − center)ᵀ·shape⁻¹·(x − center) <= 1')
	})
	.superRefine(({ cloud, region }, context) => {
		const d = cloud.mean.length;
		const lists = [
			[['region', 'center'], [region.center]],
			[['cloud', 'covariance'], cloud.covariance],
			[['region', 'shape'], region.shape]
		] as const;
		for (const [path, rows] of lists) {
			const isSquare = path[1] === 'center' || rows.length === d;
			if (isSquare && rows.every((row) => row.length === d)) continue;
			const message = `must have the size of the mean, ${d}`;
			context.addIssue({ code: 'custom', path: [...path], message });
		}
	});

export const massSchema = z.union([
	z.strictObject({ ok: z.literal(true), probability: z.number() }),
	failureSchema
]);

/** Probability that a normal execution falls inside an ellipsoid. */
export function computeMass({ cloud, region }: z.output<typeof massInputSchema>) {
	return computeMassInside({ ...cloud, ...region });
}
