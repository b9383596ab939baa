import { z } from 'zod';
import { analyseOneWay } from '../../../../analysis/one-way-anova.ts';
import {
	testPaired,
	testTwoSample,
	testWelch,
	type TTestResult
} from '../../../../analysis/t-tests.ts';
import { compareProportions } from '../../../../analysis/two-proportions.ts';
import { countReplicates } from '../../../../power/sample-counts.ts';
import { computeClopperPearsonInterval } from '../../../../statistics/clopper-pearson.ts';
import { computeDunnettCritical } from '../../../../statistics/dunnett.ts';
import { adjustPValues } from '../../../../statistics/multiplicity.ts';
import { computeWilsonInterval } from '../../../../statistics/wilson-interval.ts';
import {
	firstOf,
	forInputs,
	readNumbers,
	type Answers,
	type Datasets,
	type Topic
} from '../../topic.ts';
import { forRows, readNumber as number, readSides } from './rows.ts';

const numbers = z.array(z.number());

/** Multiple comparisons. */
export const MULTIPLICITY: Topic = firstOf(
	forRows({ needed: ['comparisons', 'df', 'alpha', 'correlation'], optional: ['sides'] }, (row) => {
		const loading = Math.sqrt(number(row, 'correlation'));
		const loadings = new Array<number>(number(row, 'comparisons')).fill(loading);
		const comparisons = { loadings, df: number(row, 'df'), sides: readSides(row) };
		return { critical: computeDunnettCritical(number(row, 'alpha'), comparisons) };
	}),
	...['p', 'p_values', 'pvalues'].map((name) =>
		forInputs(z.strictObject({ [name]: numbers }), (inputs) => {
			const p = numbers.parse(inputs[name]);
			return {
				bonferroni: adjustPValues(p, 'bonferroni'),
				holm: adjustPValues(p, 'holm'),
				hochberg: adjustPValues(p, 'hochberg')
			};
		})
	)
);

/** Intervals of shares, and replicates for a wanted width. */
export const INTERVALS: Topic = firstOf(
	forRows({ needed: ['x', 'n'], optional: ['level'] }, (row) => {
		const counts = {
			...{ successCount: number(row, 'x'), trialCount: number(row, 'n') },
			level: number(row, 'level', 0.95)
		};
		const wilson = computeWilsonInterval(counts);
		const exact = computeClopperPearsonInterval(counts);
		return {
			wilson: [wilson.lower, wilson.upper],
			clopper_pearson: [exact.lower, exact.upper]
		};
	}),
	forRows({ needed: ['p', 'half_width'], optional: ['level'] }, (row) => ({
		n: countReplicates({
			...{ p: number(row, 'p'), halfWidth: number(row, 'half_width') },
			level: number(row, 'level', 0.95)
		})
	})),
	forRows({ needed: ['x1', 'n1', 'x2', 'n2'], optional: ['level'] }, (row) => {
		const got = compareProportions({
			successes: [number(row, 'x1'), number(row, 'x2')],
			trials: [number(row, 'n1'), number(row, 'n2')],
			level: number(row, 'level', 0.95)
		});
		const { differenceInterval: d, oddsRatioInterval: o } = got;
		return {
			...{ difference: got.difference, newcombe: [d.lower, d.upper], fisher_p: got.fisherP },
			...{ odds_ratio: got.oddsRatio, odds_ratio_ci: [o.lower, o.upper] },
			...(got.score ? { z: got.score.z, p: got.score.p } : {})
		};
	})
);

/** Tests of two groups, as lists or as a dataset of values and groups. */
export const ANALYSIS: Topic = firstOf(
	forInputs(z.strictObject({ dataset: z.string() }), ({ dataset }, datasets) =>
		compareColumns(dataset, datasets)
	),
	forInputs(z.strictObject({ x: numbers, y: numbers, level: z.number().optional() }), (inputs) =>
		compareTwo(inputs.x, inputs.y, inputs.level)
	),
	forInputs(z.strictObject({ groups: z.array(numbers).min(2) }), ({ groups }) => {
		const got = analyseOneWay(groups);
		if (!got.ok) throw new RangeError(`no test is possible: ${got.reason}`);
		const { f, df1, df2, p } = got.test;
		return {
			f,
			df1,
			df2,
			p,
			F: f,
			welch_f: got.welch?.f,
			welch_df2: got.welch?.df2,
			welch_p: got.welch?.p
		};
	})
);

/** A dataset whose first column is the value and one of whose columns is the group. */
function compareColumns(name: string, datasets: Datasets): Answers | undefined {
	const columns = datasets[name]?.columns ?? [];
	const [value] = columns;
	if (value === undefined || !columns.includes('group')) return undefined;
	const rows = readNumbers(datasets, name, [value, 'group']);
	const groups = [...new Set(rows.map(([, group]) => group))];
	const lists = groups.map((wanted) =>
		rows.flatMap(([x = Number.NaN, group]) => (group === wanted ? [x] : []))
	);
	const [first, second] = lists;
	return first && second && lists.length === 2 ? compareTwo(first, second) : undefined;
}

function compareTwo(first: number[], second: number[], level = 0.95): Answers {
	return {
		...describe('welch', testWelch(first, second, { level })),
		...describe('pooled', testTwoSample(first, second, { level })),
		...describe('student', testTwoSample(first, second, { level })),
		...(first.length === second.length
			? describe('paired', testPaired(first, second, { level }))
			: {})
	};
}

function describe(name: string, test: TTestResult): Answers {
	if (!test.ok) return {};
	const { t, df, p, estimate, interval } = test;
	const ci = [interval.lower, interval.upper];
	return {
		...{ [`${name}_t`]: t, [`${name}_df`]: df, [`${name}_p`]: p },
		...{ [`${name}_ci`]: ci, [`${name}_estimate`]: estimate }
	};
}
