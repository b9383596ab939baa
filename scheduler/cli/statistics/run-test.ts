import { z } from 'zod';
import { analyseCovariance } from '../../analysis/ancova.ts';
import { testEquivalence } from '../../analysis/equivalence.ts';
import { analyseMixed } from '../../analysis/mixed-anova.ts';
import { analyseOneWay } from '../../analysis/one-way-anova.ts';
import {
	testOneSample,
	testPaired,
	testTwoSample,
	testWelch,
	type TTestResult
} from '../../analysis/t-tests.ts';
import { compareProportions } from '../../analysis/two-proportions.ts';
import { levelSchema, toInterval } from './finite.ts';

const values = z.array(z.number());
const options = {
	nullValue: z.number().default(0).describe('mean or difference under no effect'),
	alternative: z.enum(['two-sided', 'greater', 'less']).default('two-sided'),
	level: levelSchema.default(0.95)
};
const pair = { first: values, second: values };
const counts = z.tuple([z.number().int().min(0), z.number().int().min(0)]);

export const testInputSchema = z.discriminatedUnion('test', [
	z.strictObject({ test: z.literal('one-sample'), values, ...options }),
	z.strictObject({ test: z.literal('paired'), ...pair, ...options }),
	z.strictObject({ test: z.literal('pooled'), ...pair, ...options }),
	z.strictObject({ test: z.literal('welch'), ...pair, ...options }),
	z.strictObject({ test: z.literal('one-way'), groups: z.array(values).min(2) }),
	z.strictObject({
		test: z.literal('mixed'),
		people: z
			.array(z.strictObject({ group: z.number().int().min(0), values: values.min(2) }))
			.min(3)
	}),
	z.strictObject({
		...{ test: z.literal('covariance'), y: values, group: z.array(z.number().int().min(0)) },
		...{ covariates: z.array(values), level: levelSchema.default(0.95) }
	}),
	z.strictObject({
		...{ test: z.literal('equivalence'), ...pair, design: z.enum(['paired', 'pooled', 'welch']) },
		...{ lowerMargin: z.number(), upperMargin: z.number(), alpha: levelSchema.default(0.05) }
	}),
	z.strictObject({
		...{ test: z.literal('proportions'), successes: counts, trials: counts },
		level: levelSchema.default(0.95)
	})
]);

/** The names depend on the test; every F test has f, df1, df2 and p. */
export const testSchema = z.looseObject({
	ok: z.boolean().optional().describe('false: the data allow no test, see reason'),
	reason: z.string().optional()
});

/** One test of data. */
export function runTest(input: z.output<typeof testInputSchema>) {
	switch (input.test) {
		case 'one-sample':
			return withEnds(testOneSample(input.values, input));
		case 'paired':
			return withEnds(testPaired(input.first, input.second, input));
		case 'pooled':
			return withEnds(testTwoSample(input.first, input.second, input));
		case 'welch':
			return withEnds(testWelch(input.first, input.second, input));
		case 'one-way':
			return analyseOneWay(input.groups);
		case 'mixed':
			return analyseMixed(input.people);
		case 'covariance':
			return analyseCovariance(input);
		case 'equivalence':
			return testEquivalence(input.first, input.second, input);
		case 'proportions':
			return compareProportions(input);
	}
}

function withEnds(result: TTestResult) {
	return result.ok ? { ...result, interval: toInterval(result.interval) } : result;
}
