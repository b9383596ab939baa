import { z } from 'zod';
import { fitFormula, type FormulaFit } from '../../../../analysis/mixed-model/fit-formula.ts';
import type { DataColumns } from '../../../../analysis/model-formula.ts';
import type { Answers, Datasets, Topic } from '../../topic.ts';

const optionsSchema = z.object({
	formula: z.string(),
	method: z.enum(['REML', 'ML']).default('REML'),
	dataset: z.string().optional()
});
const columnSchema = z.array(z.union([z.number(), z.string()]));

/** Mixed models: a formula over a dataset, or over columns that stand among the inputs. */
export const MIXED_MODEL: Topic = (inputs, datasets) => {
	if (!('formula' in inputs)) return undefined;
	const { formula, method, dataset } = optionsSchema.parse(inputs);
	const data = dataset === undefined ? readInline(inputs) : readTable(datasets, dataset, formula);
	const model = fitFormula({ formula, data, method });
	if (!model.ok) throw new RangeError(`the model cannot be fitted: ${model.reason}`);
	return describe(model, data);
};

function readInline(inputs: Readonly<Record<string, unknown>>): DataColumns {
	return Object.fromEntries(
		Object.entries(inputs).flatMap(([name, value]) =>
			Array.isArray(value) ? [[name, columnSchema.parse(value)]] : []
		)
	);
}

/** Columns of a dataset; a name of the formula may stand for the one column that begins with it. */
function readTable(datasets: Datasets, name: string, formula: string): DataColumns {
	const table = datasets[name];
	if (!table) throw new RangeError(`there is no dataset “${name}”`);
	const columns = table.columns.map((column, i) => {
		const values = table.rows.map((row) => row[i]);
		return [column, columnSchema.parse(values)] as const;
	});
	const words = new Set(formula.match(/[A-Za-z_.][\w.]*/g) ?? []);
	const short = [...words].flatMap((word) => {
		if (table.columns.includes(word)) return [];
		const found = columns.filter(([column]) => column.startsWith(`${word}_`));
		return found.length === 1 && found[0] ? [[word, found[0][1]] as const] : [];
	});
	return Object.fromEntries([...columns, ...short]);
}

function describe(model: Extract<FormulaFit, { ok: true }>, data: DataColumns): Answers {
	const { fit, fixedEffects } = model;
	const [intercept, slope] = fit.randomSds;
	const kr = fixedEffects.map(({ kenwardRoger }) => kenwardRoger);
	return {
		beta: fixedEffects.map(({ estimate }) => estimate),
		se: fixedEffects.map(({ standardError }) => standardError),
		...{ sd_subject: intercept, sd_intercept: intercept, sd_residual: fit.residualSd },
		...{ sd_group: intercept, sigma: fit.residualSd },
		...(slope === undefined ? {} : { sd_slope: slope }),
		corr: fit.randomCorrelation ?? undefined,
		...(fit.method === 'REML' ? { reml_criterion: fit.criterion } : { deviance: fit.criterion }),
		...{ criterion: fit.criterion, loglik: fit.logLikelihood, aic: fit.aic, bic: fit.bic },
		singular: fit.isSingular,
		satterthwaite_df: fixedEffects.map(({ satterthwaite }) => satterthwaite.df),
		t: fixedEffects.map(({ satterthwaite }) => satterthwaite.t),
		p: fixedEffects.map(({ satterthwaite }) => satterthwaite.p),
		...(kr.every((test) => test !== null)
			? {
					kenward_roger_df: kr.map((test) => test?.df),
					kenward_roger_se: kr.map((test) => test?.standardError)
				}
			: {}),
		n: Object.values(data)[0]?.length,
		n_groups: fit.counts.groups
	};
}
