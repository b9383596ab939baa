import { z } from 'zod';
import { reestimateBlinded } from '../../../../power/blinded-reestimation.ts';
import {
	computeBoundaries,
	computeClassicalBoundaries,
	computeInflation
} from '../../../../power/group-sequential.ts';
import { firstOf, forInputs, type Topic } from '../../topic.ts';

const numbers = z.array(z.number());

function readShape(text: string): 'obrien-fleming' | 'pocock' {
	if (/brien/i.test(text)) return 'obrien-fleming';
	if (/pocock/i.test(text)) return 'pocock';
	throw new RangeError(`“${text}” is no spending of O’Brien-Fleming or Pocock type`);
}

const even = (count: number) => Array.from({ length: count }, (_, i) => (i + 1) / count);

/** Boundaries of looks. */
export const GROUP_SEQUENTIAL: Topic = firstOf(
	forInputs(
		z.strictObject({
			spending: z.string(),
			alpha_two_sided: z.number().optional(),
			one_sided_spent: z.number().optional(),
			looks: z.number().int().min(1).optional(),
			information: numbers.optional()
		}),
		({ spending, alpha_two_sided: alpha = 0.05, one_sided_spent, looks, information }) => {
			const shares = information ?? even(looks ?? 1);
			const boundaries = computeBoundaries({
				...{ spending: { kind: readShape(spending) }, information: shares, sides: 2 },
				alphaPerSide: one_sided_spent ?? alpha / 2
			});
			const spent = boundaries.map(({ spentSoFar }) => spentSoFar);
			return {
				z: boundaries.map(({ z: value }) => value),
				...{ cumulative_alpha_one_sided: spent, cumulative_alpha: spent.map((a) => 2 * a) },
				nominal_p: boundaries.map(({ nominalP }) => 2 * nominalP)
			};
		}
	),
	...['boundary', 'design', 'type'].map((name) =>
		forInputs(
			z.strictObject({
				[name]: z.string(),
				looks: z.number().int().min(1),
				alpha_two_sided: z.number().optional(),
				alpha: z.number().optional(),
				power: z.number().optional()
			}),
			(inputs) => {
				const {
					looks,
					alpha_two_sided,
					alpha,
					power = 0.9
				} = z
					.looseObject({
						...{ looks: z.number(), alpha_two_sided: z.number().optional() },
						...{ alpha: z.number().optional(), power: z.number().optional() }
					})
					.parse(inputs);
				const alphaPerSide = (alpha_two_sided ?? alpha ?? 0.05) / 2;
				const shape = readShape(String(inputs[name])) === 'pocock' ? 0 : 0.5;
				const bounds = computeClassicalBoundaries({
					lookCount: looks,
					alphaPerSide,
					shape,
					sides: 2
				});
				const { factor } = computeInflation({
					...{ z: bounds, information: even(looks), sides: 2, alphaPerSide, power }
				});
				return { z: bounds, constant: bounds.at(-1), inflation: factor };
			}
		)
	)
);

/** Blinded re-estimation of the sample size. */
export const REESTIMATION: Topic = forInputs(
	z.strictObject({
		pooled_blinded: numbers,
		n_per_group_interim: z.number().optional(),
		n_per_group_planned: z.number().optional(),
		delta: z.number(),
		alpha: z.number().default(0.05),
		sides: z.union([z.literal(1), z.literal(2)]).default(2),
		power: z.number()
	}),
	(inputs) => {
		const got = reestimateBlinded({
			...{ pooledValues: inputs.pooled_blinded, difference: inputs.delta, power: inputs.power },
			...{ alpha: inputs.alpha, sides: inputs.sides },
			plannedPerGroup: inputs.n_per_group_planned ?? 0
		});
		if (!got.ok) throw new RangeError(`no new size can be told: ${got.reason}`);
		return {
			...{ s2_one_sample: got.pooledVariance, s2_adjusted: got.adjustedVariance },
			...{ n_per_group_z: got.perGroupNormal, n_per_group_z_adjusted: got.perGroupNormalAdjusted },
			...{ n_per_group_t: got.perGroupT, n_per_group: got.perGroup }
		};
	}
);
