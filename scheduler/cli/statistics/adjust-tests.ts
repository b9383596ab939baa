import { z } from 'zod';
import {
	computeDunnettCritical,
	computeDunnettPValue,
	computeLoadings
} from '../../statistics/dunnett.ts';
import { ADJUSTMENTS, adjustPValues } from '../../statistics/multiplicity.ts';
import { levelSchema, sidesSchema } from './finite.ts';

const p = z.array(z.number().min(0).max(1)).min(1);

export const adjustInputSchema = z.union([
	z.strictObject({ p: p.describe('p values of several tests') }),
	z.strictObject({
		controlSize: z.number().positive(),
		treatmentSizes: z.array(z.number().positive()).min(1),
		df: z.number().positive().optional().describe('left out: people less groups'),
		t: z.array(z.number()).default([]).describe('statistics against the control, to adjust'),
		sides: sidesSchema.default(2),
		alpha: levelSchema.default(0.05)
	})
]);

export const adjustSchema = z.union([
	z.strictObject({ bonferroni: p, holm: p, hochberg: p }),
	z.strictObject({ critical: z.number(), df: z.number(), p: z.array(z.number()) })
]);

/** Adjusted p values, or Dunnett's comparisons with one control. */
export function adjustTests(
	input: z.output<typeof adjustInputSchema>
): z.output<typeof adjustSchema> {
	if ('p' in input) {
		const [bonferroni = [], holm = [], hochberg = []] = ADJUSTMENTS.map((method) =>
			adjustPValues(input.p, method)
		);
		return { bonferroni, holm, hochberg };
	}
	const { controlSize, treatmentSizes, sides, alpha, t } = input;
	const total = treatmentSizes.reduce((sum, n) => sum + n, controlSize);
	const df = input.df ?? total - treatmentSizes.length - 1;
	if (!(df > 0)) throw new RangeError('no degrees of freedom are left; say df or larger groups');
	if (t.length > 0 && t.length !== treatmentSizes.length)
		throw new RangeError(`${t.length} statistics for ${treatmentSizes.length} treatments`);
	const comparisons = { loadings: computeLoadings(treatmentSizes, controlSize), df, sides };
	const critical = computeDunnettCritical(alpha, comparisons);
	return { critical, df, p: t.map((value) => computeDunnettPValue(value, comparisons)) };
}
