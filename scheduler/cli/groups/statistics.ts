import { z } from 'zod';
import { reestimateBlinded } from '../../power/blinded-reestimation.ts';
import { computeClopperPearsonInterval } from '../../statistics/clopper-pearson.ts';
import { computeWilsonInterval } from '../../statistics/wilson-interval.ts';
import { command, type CommandGroup } from '../command.ts';
import { adjustInputSchema, adjustSchema, adjustTests } from '../statistics/adjust-tests.ts';
import { countPeople, countsInputSchema, countsSchema } from '../statistics/count-people.ts';
import {
	describeDistribution,
	distributionInputSchema,
	distributionSchema
} from '../statistics/distribution.ts';
import { intervalSchema, levelSchema, refusedSchema, sidesSchema } from '../statistics/finite.ts';
import { fitModel, modelInputSchema, modelSchema } from '../statistics/fit-model.ts';
import { looksInputSchema, looksSchema, planLooks } from '../statistics/plan-looks.ts';
import { planPower, powerInputSchema, powerSchema } from '../statistics/plan-power.ts';
import { runTest, testInputSchema, testSchema } from '../statistics/run-test.ts';

const shareSchema = z
	.strictObject({
		successCount: z.number().int().min(0),
		trialCount: z.number().int().min(1),
		level: levelSchema.default(0.95)
	})
	.refine(({ successCount, trialCount }) => successCount <= trialCount, {
		...{ path: ['successCount'], error: 'there are more successes than trials' }
	});

const reestimationInputSchema = z.strictObject({
	pooledValues: z.array(z.number()).describe('outcomes so far, without their groups'),
	difference: z.number().describe('difference of the means that is planned for'),
	alpha: z.number().gt(0).lt(1).default(0.05),
	sides: sidesSchema.default(2),
	power: z.number().gt(0).lt(1).default(0.9),
	plannedPerGroup: z.number().min(0).default(0).describe('never less than this')
});
const reestimationSchema = z.union([
	z.strictObject({
		ok: z.literal(true),
		...{ pooledVariance: z.number(), adjustedVariance: z.number() },
		...{ perGroupNormal: z.number(), perGroupNormalAdjusted: z.number() },
		...{ perGroupT: z.number(), perGroup: z.number() }
	}),
	refusedSchema
]);

/** Tests, intervals, power and mixed models on the command line. */
export const STATISTICS_COMMANDS: CommandGroup = {
	distribution: command(
		'Tails and quantiles: normal, t, chi-square, F, gamma, beta; noncentral ones too',
		{ input: distributionInputSchema, output: distributionSchema },
		describeDistribution
	),
	power: command(
		'Power at given n, or the n of a given power, for nine designs',
		{ input: powerInputSchema, output: powerSchema },
		planPower
	),
	counts: command(
		'People in clusters, people to enrol, or replicates of a simulation',
		{ input: countsInputSchema, output: countsSchema },
		countPeople
	),
	test: command(
		't tests, equivalence, analyses of variance and covariance, two shares',
		{ input: testInputSchema, output: testSchema },
		runTest
	),
	'mixed-model': command(
		'A linear mixed model by REML or ML, with degrees of freedom',
		{ input: modelInputSchema, output: modelSchema },
		fitModel
	),
	boundaries: command(
		'Boundaries of interim looks, and how many more people they cost',
		{ input: looksInputSchema, output: looksSchema },
		planLooks
	),
	reestimate: command(
		'Group sizes from the spread seen halfway, without the groups',
		{ input: reestimationInputSchema, output: reestimationSchema },
		reestimateBlinded
	),
	adjust: command(
		'p values of several tests, or comparisons with one control (Dunnett)',
		{ input: adjustInputSchema, output: adjustSchema },
		adjustTests
	),
	interval: command(
		'Confidence intervals of a share: Wilson and Clopper-Pearson',
		{
			input: shareSchema,
			output: z.strictObject({ wilson: intervalSchema, clopperPearson: intervalSchema })
		},
		(input) => ({
			wilson: computeWilsonInterval(input),
			clopperPearson: computeClopperPearsonInterval(input)
		})
	)
};
