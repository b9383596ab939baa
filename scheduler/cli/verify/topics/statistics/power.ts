import {
	computeAnovaPower,
	computeFPower,
	computeMixedAnovaPower,
	type MixedAnovaDesign
} from '../../../../power/anova-power.ts';
import { computeEquivalencePower } from '../../../../power/equivalence-power.ts';
import { computeProportionPower } from '../../../../power/proportion-power.ts';
import { computePeopleToEnrol } from '../../../../power/required-n.ts';
import { computeDesignEffect, countInClusters } from '../../../../power/sample-counts.ts';
import { firstOf, HOW_CHECKED, OneOf, type Answers, type Topic } from '../../topic.ts';
import { forRows, inRows, readNumber as number, type Row } from './rows.ts';
import { readTest, rounded, solve, TEST } from './power-tests.ts';
import { T_POWER } from './t-power.ts';

const anova = firstOf(
	forRows({ needed: ['k', 'n_per_group', 'f', 'alpha'] }, (row) => {
		const groupCount = number(row, 'k');
		const totalN = groupCount * number(row, 'n_per_group');
		const [f, alpha] = [number(row, 'f'), number(row, 'alpha')];
		return { power: computeAnovaPower({ groupCount, totalN, f, alpha }), ncp: totalN * f * f };
	}),
	forRows({ needed: ['k', 'power', 'f', 'alpha'] }, (row) => {
		const [groupCount, f, alpha] = [number(row, 'k'), number(row, 'f'), number(row, 'alpha')];
		const at = (n: number) => computeAnovaPower({ groupCount, totalN: groupCount * n, f, alpha });
		return rounded('n_per_group', solve(number(row, 'power'), 1.0001, at));
	}),
	...['ncp', 'lambda'].map((ncp) =>
		forRows({ needed: [ncp, 'df1', 'df2', 'alpha'] }, (row) => ({
			power: computeFPower({
				...{ ncp: number(row, ncp), df1: number(row, 'df1') },
				...{ df2: number(row, 'df2'), alpha: number(row, 'alpha') }
			})
		}))
	)
);

function readMixed(row: Row, f: number, effect: MixedAnovaDesign['effect']): MixedAnovaDesign {
	return {
		...{ groupCount: number(row, 'k'), measurementCount: number(row, 'm') },
		...{ totalN: number(row, 'N'), correlation: number(row, 'rho') },
		...{ epsilon: number(row, 'epsilon', 1), alpha: number(row, 'alpha', 0.05), f, effect }
	};
}

/** Noncentrality and degrees of freedom of method sheet E. */
function describeMixed(design: MixedAnovaDesign): Answers {
	const { groupCount: k, measurementCount: m, totalN: n, correlation, f, effect } = design;
	const { epsilon = 1 } = design;
	const size = n * m * f * f;
	const [between, df] = [size / (1 + (m - 1) * correlation), epsilon * (m - 1)];
	const lambda = effect === 'between' ? between : (size * epsilon) / (1 - correlation);
	const df1 = effect === 'between' ? k - 1 : effect === 'within' ? df : df * (k - 1);
	return { lambda, ncp: lambda, df1, df2: effect === 'between' ? n - k : df * (n - k) };
}

function readMixedEffect(value: unknown): MixedAnovaDesign['effect'] {
	const text = String(value);
	if (text === 'between' || text === 'within' || text === 'interaction') return text;
	throw new RangeError(`“effect” is between, within or interaction, not “${text}”`);
}

const MIXED = ['k', 'm', 'N', 'rho'] as const;
const mixed = firstOf(
	...['effect', 'type'].map((effect) =>
		forRows({ needed: [...MIXED, 'f', effect], optional: ['epsilon', 'alpha'] }, (row) => {
			const design = readMixed(row, number(row, 'f'), readMixedEffect(row[effect]));
			return { power: computeMixedAnovaPower(design), ...describeMixed(design) };
		})
	),
	forRows(
		{
			needed: [...MIXED, 'f_between', 'f_interaction'],
			optional: ['epsilon', 'alpha', 'replicates', 'f_within']
		},
		(row) => {
			const at = (name: string, effect: MixedAnovaDesign['effect']) =>
				computeMixedAnovaPower(readMixed(row, number(row, name), effect));
			const between = at('f_between', 'between');
			const interaction = at('f_interaction', 'interaction');
			const replicates = number(row, 'replicates', 20_000);
			return {
				...{ power_between: between, power_between_mc: between },
				...{ power_interaction: interaction, power_interaction_mc: interaction },
				mc_se: Math.sqrt((between * (1 - between)) / replicates),
				...(row['f_within'] === undefined ? {} : { power_within: at('f_within', 'within') })
			};
		}
	)
);

const PROPORTIONS = ['p1', 'p2'] as const;

function atShares(row: Row, n: number, method: 'normal' | 'arcsine', strict: boolean): number {
	return computeProportionPower({
		...{ p1: number(row, 'p1'), p2: number(row, 'p2'), n1: n, n2: n, ...readTest(row) },
		...{ method, strict }
	});
}

/** Both methods, both ways to count the wrong tail: a case of these names may mean any of them. */
function everyWay(row: Row, compute: (method: 'normal' | 'arcsine', strict: boolean) => number) {
	const known = ['normal', 'arcsine'] as const;
	const said = known.filter((method) => method === row['method']);
	const methods = said.length > 0 ? said : known;
	const stricts = typeof row['strict'] === 'boolean' ? [row['strict']] : [false, true];
	return new OneOf(
		...methods.flatMap((method) => stricts.map((strict) => compute(method, strict)))
	);
}

const proportions = firstOf(
	forRows({ needed: ['n_per_group', ...PROPORTIONS], optional: ['method', ...TEST] }, (row) => {
		const needs = (power: number) =>
			everyWay(row, (method, strict) => solve(power, 1, (n) => atShares(row, n, method, strict)));
		const h =
			2 * Math.asin(Math.sqrt(number(row, 'p1'))) - 2 * Math.asin(Math.sqrt(number(row, 'p2')));
		return {
			power: everyWay(row, (method, strict) =>
				atShares(row, number(row, 'n_per_group'), method, strict)
			),
			...{ h: new OneOf(h, -h), n_for_80: needs(0.8), n_for_90: needs(0.9), n_for_95: needs(0.95) }
		};
	}),
	forRows({ needed: ['power', ...PROPORTIONS], optional: ['method', ...TEST] }, (row) =>
		rounded(
			'n_per_group',
			everyWay(row, (method, strict) =>
				solve(number(row, 'power'), 1, (n) => atShares(row, n, method, strict))
			)
		)
	)
);

const equivalence = forRows(
	{ needed: ['n', 'true_difference', 'margin', 'sd', 'paired'], optional: ['alpha'] },
	(row) => {
		const n = number(row, 'n');
		const people =
			row['paired'] === true
				? { paired: true as const, n }
				: { paired: false as const, n1: n, n2: n };
		const power = computeEquivalencePower({
			...{ trueDifference: number(row, 'true_difference'), sd: number(row, 'sd') },
			...{ lowerMargin: -number(row, 'margin'), upperMargin: number(row, 'margin') },
			...{ alpha: number(row, 'alpha', 0.05), ...people }
		});
		return { power, mc: HOW_CHECKED, mc_200000: HOW_CHECKED };
	}
);

const clusters = forRows({ needed: ['m', 'icc'], optional: ['n_effective_needed'] }, (row) => {
	const cluster = { clusterSize: number(row, 'm'), icc: number(row, 'icc') };
	const deff = computeDesignEffect(cluster);
	if (row['n_effective_needed'] === undefined) return { deff };
	return { deff, n_total: countInClusters(number(row, 'n_effective_needed'), cluster).totalCount };
});

const attrition = firstOf(
	...['n', 'n_needed', 'n_completers'].flatMap((n) =>
		['attrition', 'dropout', 'loss'].map((loss) =>
			forRows({ needed: [n, loss] }, (row) => {
				const enrol = computePeopleToEnrol(number(row, n), number(row, loss));
				return { n_enrol: enrol, n_to_enrol: enrol, n_total: enrol, n_inflated: enrol };
			})
		)
	)
);

/** Power and numbers of people. */
export const POWER: Topic = inRows(
	firstOf(...[T_POWER, anova, mixed, proportions, equivalence, clusters, attrition])
);
