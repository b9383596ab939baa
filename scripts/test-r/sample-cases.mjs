import { loadModule } from '../calibration/load-module.mjs';

/**
 * Fresh random inputs for what R can compute too: for each an R expression, the engine's value and
 * the tolerance. A case may need R packages.
 */
export async function sampleCases(seed) {
	const { createSeededStream } = await loadModule('scheduler/random/seeded-stream.ts');
	const { drawNormal, drawUniform, drawBelow } = await loadModule(
		'scheduler/random/random-stream.ts'
	);
	const stream = createSeededStream(seed);
	const between = (low, high) => low + (high - low) * drawUniform(stream);
	const logBetween = (low, high) => Math.exp(between(Math.log(low), Math.log(high)));
	const many = (count, make) => Array.from({ length: count }, make).flat();
	const draw = {
		between,
		logBetween,
		below: (n) => drawBelow(stream, n),
		normal: () => drawNormal(stream)
	};
	return [
		...(await sampleDistributions(draw, many)),
		...(await samplePower(draw, many)),
		...(await sampleTests(draw, many)),
		...(await sampleModels(draw, many))
	];
}

const RELATIVE = { rel: 1e-9 };

async function sampleDistributions({ between, logBetween }, many) {
	const chi = await loadModule('scheduler/statistics/chi-square.ts');
	const f = await loadModule('scheduler/statistics/f-distribution.ts');
	const t = await loadModule('scheduler/statistics/student-t.ts');
	const beta = await loadModule('scheduler/statistics/beta-distribution.ts');
	const nct = await loadModule('scheduler/statistics/noncentral-t.ts');
	const ncf = await loadModule('scheduler/statistics/noncentral-f.ts');
	const ncx = await loadModule('scheduler/statistics/noncentral-chi-square.ts');
	return many(40, () => {
		const [df, df1, df2, p] = [
			logBetween(0.3, 500),
			logBetween(0.3, 300),
			logBetween(0.5, 500),
			between(0.001, 0.999)
		];
		const [x, ncp] = [logBetween(0.01, 300), between(0, 30)];
		const value = between(-6, 6);
		const share = between(0.001, 0.999);
		return [
			[`pchisq(${x}, ${df}, lower.tail = FALSE)`, chi.computeChiSquareSurvival(x, df), RELATIVE],
			[`qchisq(${p}, ${df})`, chi.computeChiSquareQuantile(p, df), RELATIVE],
			[`pf(${x}, ${df1}, ${df2}, lower.tail = FALSE)`, f.computeFSurvival(x, df1, df2), RELATIVE],
			[`pt(${value}, ${df})`, t.computeStudentTCdf(value, df), RELATIVE],
			[`qt(${p}, ${df})`, t.computeStudentTQuantile(p, df), { rel: 1e-8, abs: 1e-12 }],
			[
				`pbeta(${share}, ${df1}, ${df2})`,
				beta.computeBetaTails(share, { a: df1, b: df2 }).lower,
				{ rel: 1e-9, abs: 1e-300 }
			],
			[
				`pt(${value}, ${df}, ${ncp / 6})`,
				nct.computeNoncentralTCdf(value, { df, ncp: ncp / 6 }),
				{ abs: 1e-9 }
			],
			[
				`pf(${x}, ${df1}, ${df2}, ${ncp})`,
				ncf.computeNoncentralFCdf(x, { df1, df2, ncp }),
				{ abs: 1e-8 }
			],
			[
				`pchisq(${x}, ${df}, ${ncp})`,
				ncx.computeNoncentralChiSquareCdf(x, { df, ncp }),
				{ abs: 1e-8 }
			]
		].map(toCase);
	});
}

async function samplePower({ between, below }, many) {
	const { computeTwoSampleTPower } = await loadModule('scheduler/power/two-sample-t.ts');
	const { computeProportionPower } = await loadModule('scheduler/power/proportion-power.ts');
	const { computeOneSampleTPower } = await loadModule('scheduler/power/t-power.ts');
	return many(15, () => {
		const [n, d, alpha] = [2 + below(100), between(0.05, 1.5), between(0.005, 0.1)];
		const [p1, p2] = [between(0.05, 0.5), between(0.5, 0.95)];
		const design = { n1: n, n2: n, alpha, sides: 2 };
		const call = `n = ${n}, delta = ${d}, sig.level = ${alpha}, strict = TRUE`;
		return [
			[
				`power.t.test(${call})$power`,
				computeTwoSampleTPower({ ...design, effectSize: d }),
				{ abs: 1e-8 }
			],
			[
				`power.t.test(${call}, type = "paired")$power`,
				computeOneSampleTPower({ ...design, n, effectSize: d }),
				{ abs: 1e-8 }
			],
			[
				`power.prop.test(n = ${n}, p1 = ${p1}, p2 = ${p2}, sig.level = ${alpha})$power`,
				computeProportionPower({ ...design, p1, p2, method: 'normal', strict: false }),
				{ abs: 1e-9 }
			]
		].map(toCase);
	});
}

async function sampleTests({ between, below, normal }, many) {
	const t = await loadModule('scheduler/analysis/t-tests.ts');
	const { analyseOneWay } = await loadModule('scheduler/analysis/one-way-anova.ts');
	const { compareProportions } = await loadModule('scheduler/analysis/two-proportions.ts');
	const { adjustPValues } = await loadModule('scheduler/statistics/multiplicity.ts');
	const { computeClopperPearsonInterval } = await loadModule(
		'scheduler/statistics/clopper-pearson.ts'
	);
	const list = (n) => Array.from({ length: n }, () => Number((normal() * 2 + 5).toFixed(3)));
	return many(10, () => {
		const [a, b, c] = [list(3 + below(10)), list(3 + below(20)), list(4 + below(6))];
		const [welch, pooled] = [t.testWelch(a, b), t.testTwoSample(a, b)];
		const groups = `list(${[a, b, c].map(write).join(', ')})`;
		const stacked = `{ g <- ${groups}; summary(aov(unlist(g) ~ factor(rep(seq_along(g), lengths(g)))))[[1]][["Pr(>F)"]][1] }`;
		const [n1, n2] = [5 + below(30), 5 + below(30)];
		const [x1, x2] = [below(n1 + 1), below(n2 + 1)];
		const shares = compareProportions({ successes: [x1, x2], trials: [n1, n2] });
		const p = Array.from({ length: 6 }, () => between(0, 0.2));
		const at = below(6);
		return [
			[`t.test(${write(a)}, ${write(b)})$p.value`, welch.p, RELATIVE],
			[
				`t.test(${write(a)}, ${write(b)})$conf.int[2]`,
				welch.interval.upper,
				{ rel: 1e-8, abs: 1e-10 }
			],
			[`t.test(${write(a)}, ${write(b)}, var.equal = TRUE)$p.value`, pooled.p, RELATIVE],
			[stacked, analyseOneWay([a, b, c]).test.p, { rel: 1e-8 }],
			[
				`fisher.test(matrix(c(${x1}, ${n1 - x1}, ${x2}, ${n2 - x2}), 2))$p.value`,
				shares.fisherP,
				{ rel: 1e-7 }
			],
			[`p.adjust(${write(p)}, "holm")[${at + 1}]`, adjustPValues(p, 'holm')[at], RELATIVE],
			[`p.adjust(${write(p)}, "hochberg")[${at + 1}]`, adjustPValues(p, 'hochberg')[at], RELATIVE],
			[
				`binom.test(${x1}, ${n1})$conf.int[1]`,
				computeClopperPearsonInterval({ successCount: x1, trialCount: n1, level: 0.95 }).lower,
				{ rel: 1e-8, abs: 1e-12 }
			]
		].map(toCase);
	});
}

async function sampleModels({ between, below, normal }, many) {
	const { fitFormula } = await loadModule('scheduler/analysis/mixed-model/fit-formula.ts');
	return many(8, () => {
		const people = 8 + below(20);
		const [levelSd, slopeSd] = [between(0.2, 2), between(0.1, 0.8)];
		const rows = Array.from({ length: people }, (_, id) => {
			const [level, slope] = [levelSd * normal(), slopeSd * normal()];
			return Array.from({ length: 4 + below(4) }, (_unused, day) => ({
				...{ id: id + 1, day, arm: id % 2 },
				y: Number((3 + level + (slope - 0.2) * day + normal()).toFixed(4))
			}));
		}).flat();
		const columns = Object.fromEntries(
			['y', 'day', 'arm', 'id'].map((name) => [name, rows.map((row) => row[name])])
		);
		const model = fitFormula({
			formula: 'y ~ day * arm + (1 + day | id)',
			data: columns,
			method: 'REML'
		});
		if (!model.ok) throw new Error(`the engine did not fit: ${model.reason}`);
		const effect = model.fixedEffects[3];
		const data = `data.frame(${Object.entries(columns)
			.map(([name, values]) => `${name} = ${write(values)}`)
			.join(', ')})`;
		const fit = `m <- lmer(y ~ day * arm + (1 + day | id), ${data}, control = lmerControl(calc.derivs = FALSE, optCtrl = list(ftol_abs = 1e-12, xtol_abs = 1e-12)))`;
		const need = (wanted, name) => ({ ...wanted, needs: name });
		return [
			need(
				toCase([`{ ${fit}; REMLcrit(m) }`, model.fit.criterion, { abs: 1e-4, above: 1e-8 }]),
				'lme4'
			),
			need(
				toCase([
					`{ ${fit}; fixef(m)[[4]] }`,
					effect.estimate,
					{ abs: 2e-4 * effect.standardError }
				]),
				'lme4'
			),
			need(
				toCase([
					`{ ${fit}; sqrt(diag(as.matrix(vcov(m))))[[4]] }`,
					effect.standardError,
					{ rel: 2e-4 }
				]),
				'lme4'
			),
			need(
				toCase([`{ ${fit}; coef(summary(m))[4, "df"] }`, effect.satterthwaite.df, { rel: 1e-2 }]),
				'lmerTest'
			)
		];
	});
}

function toCase([expression, value, tolerance]) {
	return { expression, value, tolerance };
}

function write(values) {
	return `c(${values.join(', ')})`;
}
