import { firstOf, HOW_CHECKED, type Topic } from '../../topic.ts';
import {
	computeAncovaPower,
	computeDifferenceSd,
	computeOneSampleTPower,
	computeSlopePower
} from '../../../../power/t-power.ts';
import { approximateWelchPower, computeWelchPower } from '../../../../power/welch-power.ts';
import { computePooledPower } from './pooled-power.ts';
import { readTest, rounded, solve, TEST, withStrict } from './power-tests.ts';
import { forRows, readNumber as number, type Row } from './rows.ts';

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

/** Power of tests whose statistic is t. */
export const T_POWER: Topic = firstOf(...twoSample, ...paired, ...[welch, ancova, slope]);
