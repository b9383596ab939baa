import { z } from 'zod';
import { CURVE_KINDS } from '../../learners/fit/curve-models.ts';
import { compareCurves, fitFromStarts, fitLearningCurve } from '../../learners/fit/fit-curve.ts';
import { createFormulaModel } from '../../learners/fit/formula-model.ts';
import { describeTrend, judgePlateau } from '../../learners/plateau.ts';
import { parseFormula } from '../../tasks/formula/parse-formula.ts';
import { command, type CommandGroup } from '../command.ts';
import { learnInputSchema, learnOutputSchema, runLearner } from '../run-learner.ts';

const numbers = z.array(z.number());

const seriesSchema = {
	times: numbers.min(4).describe('trial or block numbers'),
	values: numbers.min(4),
	/** Confidence of the profile intervals; null: none. */
	level: z.number().gt(0).lt(1).nullable().default(0.95)
};

const formulaSchema = z.strictObject({
	formula: z.string().min(1).describe('over the time t and the parameters'),
	start: z.record(z.string(), z.number()).describe('a start value for every parameter')
});

const fitInputSchema = z
	.strictObject({
		...seriesSchema,
		curve: z.union([z.enum([...CURVE_KINDS, 'best']), formulaSchema]).default('best')
	})
	.superRefine(({ times, values, curve }, context) => {
		const fault = (path: string[], message: string) =>
			context.addIssue({ code: 'custom', path, message });
		if (times.length !== values.length)
			fault(['values'], `${values.length} values for ${times.length} times`);
		if (typeof curve === 'string') return;
		const parsed = parseFormula(curve.formula, ['t', ...Object.keys(curve.start)]);
		if (!parsed.ok)
			fault(['curve', 'formula'], `character ${parsed.position + 1}: ${parsed.message}`);
		if (Object.keys(curve.start).length >= times.length)
			fault(['curve', 'start'], 'more values than parameters are needed');
	});

const end = z.number().nullable();
const fittedSchema = z.looseObject({
	ok: z.literal(true),
	parameters: z.array(
		z.strictObject({
			name: z.string(),
			value: z.number(),
			standardError: z.number(),
			interval: z
				.strictObject({ low: end, high: end })
				.nullable()
				.describe('an end is null where the data do not bound the parameter')
		})
	),
	rss: z.number(),
	sigma: z.number(),
	df: z.number(),
	aicc: end,
	fitted: numbers
});
const fitOutputSchema = z.union([
	fittedSchema,
	z.looseObject({ ok: z.literal(false), reason: z.string() })
]);

const plateauInputSchema = z.strictObject({
	blocks: z
		.array(
			z.strictObject({
				mean: z.number().describe('mean error'),
				sd: z.number().nonnegative().describe('SD of a trial'),
				trialCount: z.number().int().min(2)
			})
		)
		.min(4),
	margin: z.number().positive().default(0.25),
	level: z.number().gt(0).lt(1).default(0.9)
});
const plateauOutputSchema = z.strictObject({
	verdict: z.looseObject({ ok: z.boolean() }),
	trend: z.looseObject({ slope: z.number(), slopeSe: z.number(), p: z.number() })
});

/** Learners and learning curves on the command line. */
export const LEARNING_COMMANDS: CommandGroup = {
	learn: command(
		'The course of a model learner over trials, clamped trials and hours without',
		{ input: learnInputSchema, output: learnOutputSchema },
		runLearner
	),
	'fit-curve': command(
		'A learning curve with its profile intervals; “best” compares the known forms by AICc',
		{ input: fitInputSchema, output: fitOutputSchema },
		fitCurve
	),
	plateau: command(
		'Whether the mean error of the last blocks stands still',
		{ input: plateauInputSchema, output: plateauOutputSchema },
		(input) => ({
			verdict: judgePlateau(input),
			trend: describeTrend(input.blocks.map(({ mean }) => mean))
		})
	)
};

function fitCurve({ times, values, curve, level }: z.output<typeof fitInputSchema>) {
	if (typeof curve !== 'string') return fitFormula({ times, values, level }, curve);
	if (curve !== 'best')
		return { curve, ...fitLearningCurve({ kind: curve, times, values, level }) };
	const { fits, refused } = compareCurves({ kinds: CURVE_KINDS, times, values });
	const [best] = fits;
	if (!best) return { ok: false, reason: 'not-identified', refused };
	const compared = fits.map(({ kind, aicc }) => ({ curve: kind, aicc }));
	const fit = fitLearningCurve({ kind: best.kind, times, values, level });
	return { curve: best.kind, ...fit, compared, refused };
}

function fitFormula(
	series: { times: number[]; values: number[]; level: number | null },
	{ formula, start }: z.output<typeof formulaSchema>
) {
	const model = createFormulaModel({ formula, time: 't', parameters: Object.keys(start) });
	return { curve: formula, ...fitFromStarts({ ...series, model, starts: [Object.values(start)] }) };
}
