import { z } from 'zod';
import { computeAnovaPower, computeMixedAnovaPower } from '../../power/anova-power.ts';
import { computeEquivalencePower } from '../../power/equivalence-power.ts';
import { computeProportionPower } from '../../power/proportion-power.ts';
import { computePeopleToEnrol } from '../../power/required-n.ts';
import { findSmallestN } from '../../power/smallest-n.ts';
import {
	computeAncovaPower,
	computeOneSampleTPower,
	computeSlopePower,
	computeTPower
} from '../../power/t-power.ts';
import { computeWelchPower } from '../../power/welch-power.ts';
import { refusedSchema, sidesSchema } from './finite.ts';

const positive = z.number().positive();
/** Beyond these the power is 0 or 1, and the series behind it do not end in a lifetime. */
const people = z.number().max(1e7);
const effectSize = z.number().min(-100).max(100);
const f = positive.max(100);
const asked = {
	n: z
		.union([people, z.array(people).min(1)])
		.optional()
		.describe('people per group (paired and one-sample: people) whose power is wanted'),
	power: z.number().gt(0).lt(1).optional().describe('power whose n is wanted'),
	lossShare: z.number().min(0).lt(1).default(0).describe('people who leave before the outcome'),
	alpha: z.number().gt(0).lt(1).default(0.05)
};
const tested = {
	...asked,
	sides: sidesSchema.default(2),
	strict: z.boolean().default(true).describe('two-sided: a result the wrong way counts as well')
};
const ratio = positive.default(1).describe('people of group 2 for each of group 1');

export const powerInputSchema = z
	.discriminatedUnion('design', [
		z.strictObject({ design: z.literal('two-sample'), effectSize, ratio, ...tested }),
		z.strictObject({ design: z.literal('paired'), effectSize, ...tested }),
		z.strictObject({
			...{ design: z.literal('welch'), difference: z.number(), sd1: positive, sd2: positive },
			...{ ratio, ...asked, sides: sidesSchema.default(2) }
		}),
		z.strictObject({
			...{ design: z.literal('anova'), groupCount: z.number().int().min(2), f, ...asked }
		}),
		z.strictObject({
			...{ design: z.literal('mixed-anova'), groupCount: z.number().int().min(1) },
			...{ measurementCount: z.number().int().min(2), correlation: z.number(), f },
			...{ epsilon: positive.max(1).default(1) },
			...{ effect: z.enum(['between', 'within', 'interaction']), ...asked }
		}),
		z.strictObject({
			...{ design: z.literal('ancova'), effectSize, ratio },
			...{
				correlation: z.number().gt(-1).lt(1),
				covariateCount: z.number().int().min(0).default(1)
			},
			...tested
		}),
		z.strictObject({
			...{ design: z.literal('slope'), slopeDifference: z.number(), ratio },
			...{ times: z.array(z.number()).min(2), slopeSd: z.number().min(0) },
			...{ residualSd: z.number().min(0), ...tested }
		}),
		z.strictObject({
			...{
				design: z.literal('proportions'),
				p1: z.number().gt(0).lt(1),
				p2: z.number().gt(0).lt(1)
			},
			...{ method: z.enum(['normal', 'arcsine']).default('normal'), ratio, ...tested }
		}),
		z.strictObject({
			...{ design: z.literal('equivalence'), trueDifference: z.number(), sd: positive },
			...{ lowerMargin: z.number(), upperMargin: z.number(), paired: z.boolean().default(false) },
			...{ ratio, ...asked }
		})
	])
	.superRefine((input, context) => {
		if (input.n === undefined && input.power === undefined)
			context.addIssue({ code: 'custom', path: ['n'], message: 'say n, or the power wanted' });
	});

const pointSchema = z.strictObject({
	n: z.number(),
	power: z.number(),
	powerWithLosses: z.number().nullable().describe('null: too few people are left')
});
export const powerSchema = z.strictObject({
	points: z.array(pointSchema),
	required: z
		.union([
			z.strictObject({
				ok: z.literal(true),
				exactN: z.number(),
				n: z.number(),
				toEnrol: z.number().describe('people per group so that n are left after losses')
			}),
			refusedSchema
		])
		.nullable()
});

type PowerInput = z.output<typeof powerInputSchema>;

/** Power at each n asked for, and the n of the power asked for. */
export function planPower(input: PowerInput): z.output<typeof powerSchema> {
	const { compute, smallest } = findPower(input);
	const ns = input.n === undefined ? [] : Array.isArray(input.n) ? input.n : [input.n];
	const stay = 1 - input.lossShare;
	return {
		points: ns.map((n) => ({
			...{ n, power: compute(n) },
			powerWithLosses: n * stay >= smallest ? compute(n * stay) : null
		})),
		required: input.power === undefined ? null : findRequired(input.power)
	};

	function findRequired(power: number) {
		const found = findSmallestN({ computePower: compute, power, smallest });
		if (!found.ok) return found;
		return { ...found, toEnrol: computePeopleToEnrol(found.n, input.lossShare) };
	}
}

function findPower(input: PowerInput): { compute: (n: number) => number; smallest: number } {
	const smallest = 'ratio' in input ? Math.max(2, 2 / input.ratio) : 2;
	switch (input.design) {
		case 'two-sample': {
			const { effectSize, ratio: r } = input;
			const compute = (n: number) =>
				computeTPower({
					...{ ...readTest(input), df: n * (1 + r) - 2 },
					ncp: effectSize * Math.sqrt((n * r) / (1 + r))
				});
			return { compute, smallest };
		}
		case 'paired':
			return { compute: (n) => computeOneSampleTPower({ ...input, n }), smallest };
		case 'welch': {
			const compute = (n: number) => computeWelchPower({ ...input, n1: n, n2: n * input.ratio });
			return { compute, smallest };
		}
		case 'anova': {
			const compute = (n: number) => computeAnovaPower({ ...input, totalN: n * input.groupCount });
			return { compute, smallest };
		}
		case 'mixed-anova': {
			const compute = (n: number) =>
				computeMixedAnovaPower({ ...input, totalN: n * input.groupCount });
			return { compute, smallest };
		}
		case 'ancova': {
			const compute = (n: number) => computeAncovaPower({ ...input, n1: n, n2: n * input.ratio });
			const least = (input.covariateCount + 2.001) / (1 + input.ratio);
			return { compute, smallest: Math.max(smallest, least) };
		}
		case 'slope': {
			const compute = (n: number) => computeSlopePower({ ...input, n1: n, n2: n * input.ratio });
			return { compute, smallest };
		}
		case 'proportions': {
			const compute = (n: number) =>
				computeProportionPower({ ...input, n1: n, n2: n * input.ratio });
			return { compute, smallest };
		}
		case 'equivalence': {
			const compute = (n: number) =>
				computeEquivalencePower(
					input.paired
						? { ...input, paired: true, n }
						: { ...input, paired: false, n1: n, n2: n * input.ratio }
				);
			return { compute, smallest };
		}
	}
}

function readTest({ alpha, sides, strict }: { alpha: number; sides: 1 | 2; strict: boolean }) {
	return { alpha, sides, strict };
}
