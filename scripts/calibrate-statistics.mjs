#!/usr/bin/env node
// Type I error of each test at unequal group sizes and coverage of each interval, by simulation with
// fixed seeds: writes its section of scheduler/CALIBRATION.md. `--replicates 2000` for a quick look,
// which is printed and not written.
import { loadModule } from './calibration/load-module.mjs';
import { loadScenarios } from './calibration/statistics-scenarios.mjs';
import { writeSection } from './calibration/write-section.mjs';
import { writeTable } from './calibration/write-table.mjs';

const place = process.argv.indexOf('--replicates');
const given = place > 0 ? Number(process.argv[place + 1]) : null;
const R = given ?? 20_000;
const slow = Math.max(100, Math.round(R / 5));

const s = await loadScenarios();
const text = [
	`Written by \`node scripts/calibrate-statistics.mjs\`. Every test at 5 %, every interval at 95 %, no true effect unless said; ${R} simulated studies a row (mixed models ${slow}), so that a rate of .05 has a standard error of ${show(Math.sqrt((0.05 * 0.95) / R))} (${show(Math.sqrt((0.05 * 0.95) / slow))}). Fixed seeds, one stream a row.`,
	'### Two groups',
	tableOfTwoGroups(s),
	'The test with one common variance holds its level only when the variances are alike or the groups are; Welch’s test stays near it everywhere, a little above with four people in a group.',
	'### Three groups and more',
	tableOfGroups(s),
	'### Groups and repeated measurements',
	tableOfMixed(s),
	'`alike`: all measurements equally correlated; `fading`: correlation falls with distance, so that the degrees of freedom must shrink. Huynh and Feldt’s epsilon is capped at 1.',
	'### Covariates, equivalence, looks, re-estimated sizes',
	tableOfOthers(s),
	'Equivalence is tried at the margin itself, where its error is largest.',
	'### Mixed models: day by arm, seven days, 3 % dropout a day',
	tableOfModels(s),
	'z: normal distribution, shown for comparison. Singular fits are counted as fits.',
	'### Two shares',
	tableOfShares(s),
	'### Coverage of intervals of one share (exact, all shares from .01 to .99)',
	await tableOfOneShare()
].join('\n\n');
if (given === null) writeSection('Tests and intervals', [text]);
else console.log(text);

function show(value) {
	return value.toFixed(4).replace(/^0/, '');
}

function tableOfTwoGroups({ twoGroups }) {
	const rows = [
		[15, 15, 1, 1],
		[5, 15, 1, 1],
		[5, 15, 2, 1],
		[5, 15, 1, 2],
		[10, 30, 3, 1],
		[10, 30, 1, 3],
		[4, 40, 1, 1]
	];
	return writeTable(
		['n', 'SD', 'common variance: type I', 'coverage', 'Welch: type I', 'coverage'],
		rows.map(([n1, n2, sd1, sd2]) => {
			const got = twoGroups(R, n1, n2, sd1, sd2);
			return [
				`${n1}, ${n2}`,
				`${sd1}, ${sd2}`,
				show(got.pooled),
				show(got.pooledCovers),
				show(got.welch),
				show(got.welchCovers)
			];
		})
	);
}

function tableOfGroups({ threeGroups, dunnett }) {
	const anova = [
		[
			[5, 10, 20],
			[1, 1, 1]
		],
		[
			[5, 10, 20],
			[3, 2, 1]
		],
		[
			[5, 10, 20],
			[1, 2, 3]
		]
	].map(([sizes, sds]) => {
		const got = threeGroups(R, sizes, sds);
		return [
			`one-way, n ${sizes.join(', ')}, SD ${sds.join(', ')}`,
			show(got.plain),
			show(got.welch)
		];
	});
	const against = [
		[[10, 10, 10, 10], 2],
		[[15, 6, 8, 12], 2],
		[[15, 6, 8, 12], 1]
	].map(([sizes, sides]) => [
		`Dunnett, control ${sizes[0]}, treatments ${sizes.slice(1).join(', ')}, ${sides === 2 ? 'two' : 'one'}-sided`,
		show(dunnett(R, sizes, sides).any),
		''
	]);
	return writeTable(['design', 'type I', 'Welch’s F'], [...anova, ...against]);
}

function tableOfMixed({ mixedAnova }) {
	const rows = [
		[[10, 10], 4, 0.5, 'alike'],
		[[6, 14], 4, 0.5, 'alike'],
		[[6, 14], 6, 0.8, 'fading'],
		[[5, 9, 12], 6, 0.8, 'fading']
	];
	return writeTable(
		[
			'n',
			'measurements',
			'correlation',
			'between',
			'within (GG)',
			'interaction, uncorrected',
			'GG',
			'HF'
		],
		rows.map(([sizes, m, rho, kind]) => {
			const got = mixedAnova(R, sizes, m, rho, kind);
			return [
				sizes.join(', '),
				m,
				`${rho} ${kind}`,
				show(got.between),
				show(got.within),
				show(got.plain),
				show(got.greenhouseGeisser),
				show(got.huynhFeldt)
			];
		})
	);
}

function tableOfOthers({ covariance, equivalence, reestimation, sequential }) {
	const ancova = [
		[8, 24],
		[20, 20]
	].map(([a, b]) => {
		const got = covariance(R, a, b);
		return [`ANCOVA, n ${a}, ${b}`, show(got.test), show(got.covers)];
	});
	const same = [
		[8, 24, 1, 1],
		[8, 24, 2, 1]
	].map(([a, b, x, y]) => {
		const got = equivalence(R, a, b, x, y);
		return [
			`equivalence, n ${a}, ${b}, SD ${x}, ${y}: common variance; Welch`,
			`${show(got.pooled)}; ${show(got.welch)}`,
			''
		];
	});
	const sized = [
		[10, 1],
		[10, 2.5]
	].map(([n, sd]) => [
		`blinded re-estimation after ${n} a group, SD ${sd}`,
		show(reestimation(slow, n, sd).test),
		''
	]);
	const looks = [
		['obrien-fleming', [0.3, 0.55, 0.8, 1]],
		['pocock', [0.1, 0.15, 0.7, 1]],
		['obrien-fleming', [0.2, 0.4, 0.6, 0.8, 1]]
	].map(([kind, shares]) => [
		`looks at ${shares.join(', ')}, ${kind === 'pocock' ? 'Pocock' : 'O’Brien-Fleming'} type`,
		show(sequential(R, kind, shares).test),
		''
	]);
	return writeTable(['design', 'type I', 'coverage'], [...ancova, ...same, ...sized, ...looks]);
}

function tableOfModels({ mixedModel }) {
	const rows = [
		[6, 6, 0.1],
		[4, 12, 0.1],
		[10, 10, 0.1],
		[7, 20, 0.1],
		[10, 10, 0]
	];
	return writeTable(
		['n', 'SD of slopes', 'z', 'Satterthwaite', 'Kenward-Roger', 'singular fits', 'failed fits'],
		rows.map(([a, b, sd]) => {
			const got = mixedModel(slow, a, b, sd);
			return [
				`${a}, ${b}`,
				sd,
				show(got.wald),
				show(got.satterthwaite),
				show(got.kenwardRoger),
				show(got.singular),
				show(got.failed)
			];
		})
	);
}

function tableOfShares({ shares }) {
	const rows = [
		[0.3, 15, 40],
		[0.1, 15, 40],
		[0.5, 30, 30]
	];
	return writeTable(
		[
			'share',
			'n',
			'score test: type I',
			'Fisher: type I',
			'Newcombe: coverage',
			'odds ratio: coverage'
		],
		rows.map(([p, a, b]) => {
			const got = shares(R, p, a, b);
			return [
				p,
				`${a}, ${b}`,
				show(got.score),
				show(got.fisher),
				show(got.differenceCovers),
				show(got.oddsCovers)
			];
		})
	);
}

async function tableOfOneShare() {
	const { computeWilsonInterval } = await loadModule('scheduler/statistics/wilson-interval.ts');
	const { computeClopperPearsonInterval } = await loadModule(
		'scheduler/statistics/clopper-pearson.ts'
	);
	const { computeLogGamma } = await loadModule('scheduler/statistics/log-gamma.ts');
	const ps = Array.from({ length: 99 }, (_, i) => (i + 1) / 100);
	return writeTable(
		['n', 'Wilson: mean', 'least', 'Clopper-Pearson: mean', 'least'],
		[8, 20, 60, 240].map((n) => {
			const weight = (x, p) =>
				Math.exp(
					computeLogGamma(n + 1) -
						computeLogGamma(x + 1) -
						computeLogGamma(n - x + 1) +
						x * Math.log(p) +
						(n - x) * Math.log1p(-p)
				);
			const cells = [computeWilsonInterval, computeClopperPearsonInterval].flatMap((compute) => {
				const ends = Array.from({ length: n + 1 }, (_, x) =>
					compute({ successCount: x, trialCount: n, level: 0.95 })
				);
				const covered = ps.map((p) =>
					ends.reduce((sum, e, x) => sum + (e.lower <= p && p <= e.upper ? weight(x, p) : 0), 0)
				);
				return [covered.reduce((a, b) => a + b, 0) / covered.length, Math.min(...covered)];
			});
			return [n, ...cells.map(show)];
		})
	);
}
