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
import { findSmallestN } from '../../../../power/smallest-n.ts';
import {
	computeAncovaPower,
	computeDifferenceSd,
	computeOneSampleTPower,
	computeSlopePower
} from '../../../../power/t-power.ts';
import { approximateWelchPower, computeWelchPower } from '../../../../power/welch-power.ts';
import { firstOf, HOW_CHECKED, OneOf, type Answers, type Topic } from '../../topic.ts';
import { computePooledPower } from './pooled-power.ts';
import { forRows, inRows, readNumber as number, readSides, type Row } from './rows.ts';

const TEST = ['alpha', 'sides', 'tails', 'strict'] as const;

function readTest(row: Row) {
	return { alpha: number(row, 'alpha', 0.05), sides: readSides(row) };
}

/** Both ways to count the wrong tail where a case does not say which it means. */
function withStrict(row: Row, compute: (strict: boolean) => number): unknown {
	const strict = row['strict'];
	if (typeof strict === 'boolean') return compute(strict);
	return new OneOf(compute(true), compute(false));
}

function solve(power: number, smallest: number, computePower: (n: number) => number): number {
	const found = findSmallestN({ computePower, power, smallest });
	if (!found.ok) throw new RangeError(`no n reaches that power: ${found.reason}`);
	return found.exactN;
}

function rounded(name: string, exact: unknown): Answers {
	const up = (value: unknown) => (typeof value === 'number' ? Math.ceil(value - 1e-9) : value);
	const whole = exact instanceof OneOf ? new OneOf(...exact.values.map(up)) : up(exact);
	return { [name]: exact, n: exact, [`${name}_rounded`]: whole, n_ceiling: whole };
}

/** Standardised difference: d, or delta over sd. */
function readEffect(row: Row): number {
	if (row['d'] !== undefined) return number(row, 'd');
	return number(row, 'delta') / number(row, 'sd', 1);
}

const TWO_SAMPLE: readonly { needed: readonly string[]; optional: readonly string[] }[] = [
	{ needed: ['d'], optional: TEST },
	{ needed: ['delta'], optional: ['sd', ...TEST] }
];

const twoSample = TWO_SAMPLE.flatMap(({ needed, optional }) => [
	...['n_per_group', 'n'].map((n) =>
		forRows({ needed: [n, ...needed], optional }, (row) => ({
			power: withStrict(row, (strict) =>
				computePooledPower({
					effectSize: readEffect(row),
					n: number(row, n),
					...readTest(row),
					strict
				})
			)
		}))
	),
	forRows({ needed: ['n1', 'n2', ...needed], optional }, (row) => ({
		power: withStrict(row, (strict) =>
			computePooledPower({
				...{ effectSize: readEffect(row), n: number(row, 'n1'), n2: number(row, 'n2') },
				...{ ...readTest(row), strict }
			})
		)
	})),
	forRows({ needed: ['power', ...needed], optional }, (row) =>
		rounded(
			'n_per_group',
			withStrict(row, (strict) =>
				solve(number(row, 'power'), 2, (n) =>
					computePooledPower({ effectSize: readEffect(row), n, ...readTest(row), strict })
				)
			)
		)
	)
]);

/** Paired: the deviation of differences itself, or from both deviations and their correlation. */
function readPaired(row: Row): number {
	const sd =
		row['sd_diff'] !== undefined
			? number(row, 'sd_diff')
			: computeDifferenceSd({
					sd1: number(row, 'sd1', number(row, 'sd', 1)),
					sd2: number(row, 'sd2', number(row, 'sd', 1)),
					correlation: number(row, 'rho')
				});
	return number(row, row['delta_mean'] === undefined ? 'delta' : 'delta_mean') / sd;
}

const paired = ['delta_mean', 'delta'].flatMap((delta) =>
	[['sd_diff'], ['sd1', 'sd2', 'rho'], ['sd', 'rho']].flatMap((spread) => [
		forRows({ needed: ['power', delta, ...spread], optional: TEST }, (row) =>
			rounded(
				'n_pairs',
				withStrict(row, (strict) =>
					solve(number(row, 'power'), 2, (n) =>
						computeOneSampleTPower({ effectSize: readPaired(row), n, ...readTest(row), strict })
					)
				)
			)
		),
		...['n_pairs', 'n'].map((n) =>
			forRows({ needed: [n, delta, ...spread], optional: TEST }, (row) => ({
				power: withStrict(row, (strict) =>
					computeOneSampleTPower({
						...{ effectSize: readPaired(row), n: number(row, n), ...readTest(row), strict }
					})
				)
			}))
		)
	])
);

const welch = forRows(
	{ needed: ['n1', 'n2', 'sd1', 'sd2', 'difference'], optional: TEST },
	(row) => {
		const design = {
			...{ n1: number(row, 'n1'), n2: number(row, 'n2'), sd1: number(row, 'sd1') },
			...{ sd2: number(row, 'sd2'), difference: number(row, 'difference'), ...readTest(row) }
		};
		const { power, df } = approximateWelchPower(design);
		const exact = computeWelchPower(design);
		return {
			...{ power: exact, power_exact: exact, power_noncentral_t_approx: power, approx_df: df },
			...{ power_mc: HOW_CHECKED, power_mc_200000: HOW_CHECKED }
		};
	}
);

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

const ancova = firstOf(
	...['d', 'delta'].flatMap((effect) =>
		['rho', 'r', 'correlation'].map((rho) =>
			forRows(
				{ needed: ['n_per_group', effect, rho], optional: ['sd', 'covariates', ...TEST] },
				(row) => {
					const n = number(row, 'n_per_group');
					return {
						power: withStrict(row, (strict) =>
							computeAncovaPower({
								...{ effectSize: readEffect(row), n1: n, n2: n, correlation: number(row, rho) },
								...{ covariateCount: number(row, 'covariates', 1), ...readTest(row), strict }
							})
						)
					};
				}
			)
		)
	)
);

const SLOPE_NAMES = {
	difference: ['delta', 'delta_slope', 'slope_difference', 'difference'],
	slopeSd: ['sd_slope', 'sigma_b', 'sd_b', 'sigma_slope'],
	residualSd: ['sd_residual', 'sigma', 'sd_resid', 'sigma_e', 'sd_error'],
	times: ['times', 'days', 't', 'S_xx', 'sxx', 'Sxx']
};

/** Slopes; the measuring times are a list, or their sum of squares, so inputs do not run in parallel. */
const slope: Topic = (inputs, datasets) => {
	const found = Object.entries(SLOPE_NAMES).map(
		([what, names]) => [what, names.find((name) => name in inputs)] as const
	);
	if (found.some(([, name]) => name === undefined)) return undefined;
	const names = Object.fromEntries(found);
	const name = (what: keyof typeof SLOPE_NAMES) => names[what] ?? '';
	const { [name('times')]: given, ...rest } = inputs;
	const times = Array.isArray(given) ? given.map(Number) : { sumOfSquares: Number(given) };
	const needed = ['n_per_group', name('difference'), name('slopeSd'), name('residualSd')];
	return forRows({ needed, optional: TEST }, (row) => {
		const n = number(row, 'n_per_group');
		return {
			df: 2 * n - 2,
			power: withStrict(row, (strict) =>
				computeSlopePower({
					...{ slopeDifference: number(row, name('difference')), n1: n, n2: n, times },
					...{ slopeSd: number(row, name('slopeSd')), residualSd: number(row, name('residualSd')) },
					...{ ...readTest(row), strict }
				})
			)
		};
	})(rest, datasets);
};

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
	firstOf(
		...twoSample,
		...paired,
		...[welch, anova, mixed, ancova, slope, proportions, equivalence, clusters, attrition]
	)
);
