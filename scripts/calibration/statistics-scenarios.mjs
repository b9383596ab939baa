import { loadModule } from './load-module.mjs';

/** Simulations behind the tables of calibrate-statistics.mjs. Each scenario has a stream of its own. */
export async function loadScenarios() {
	const { createSeededStream } = await loadModule('scheduler/random/seeded-stream.ts');
	const { drawNormal, drawUniform } = await loadModule('scheduler/random/random-stream.ts');
	const t = await loadModule('scheduler/analysis/t-tests.ts');
	const { analyseOneWay } = await loadModule('scheduler/analysis/one-way-anova.ts');
	const { analyseMixed } = await loadModule('scheduler/analysis/mixed-anova.ts');
	const { analyseCovariance } = await loadModule('scheduler/analysis/ancova.ts');
	const { testEquivalence } = await loadModule('scheduler/analysis/equivalence.ts');
	const { compareProportions } = await loadModule('scheduler/analysis/two-proportions.ts');
	const { fitMixedModel } = await loadModule('scheduler/analysis/mixed-model/fit-mixed-model.ts');
	const { createSatterthwaite } = await loadModule(
		'scheduler/analysis/mixed-model/satterthwaite.ts'
	);
	const { computeKenwardRoger } = await loadModule(
		'scheduler/analysis/mixed-model/kenward-roger.ts'
	);
	const { computeStudentTSurvival } = await loadModule('scheduler/statistics/student-t.ts');
	const { computeNormalSurvival } = await loadModule('scheduler/statistics/normal.ts');
	const { reestimateBlinded } = await loadModule('scheduler/power/blinded-reestimation.ts');
	const { computeBoundaries } = await loadModule('scheduler/power/group-sequential.ts');
	const { computeDunnettCritical, computeLoadings } = await loadModule(
		'scheduler/statistics/dunnett.ts'
	);

	const normals = (stream, n, sd = 1, mean = 0) =>
		Array.from({ length: n }, () => mean + sd * drawNormal(stream));
	let scenario = 0;

	/** Shares of replicates in which each named event happened. */
	function count(replicates, once) {
		const stream = createSeededStream(20_270_311, scenario++);
		const totals = {};
		for (let i = 0; i < replicates; i += 1)
			for (const [name, happened] of Object.entries(once(stream)))
				totals[name] = (totals[name] ?? 0) + (happened ? 1 : 0);
		return Object.fromEntries(Object.entries(totals).map(([name, n]) => [name, n / replicates]));
	}

	const reject = (test) => test.ok && test.p < 0.05;
	const covers = (test, truth) => test.interval.lower <= truth && truth <= test.interval.upper;

	function twoGroups(replicates, n1, n2, sd1, sd2) {
		return count(replicates, (stream) => {
			const [a, b] = [normals(stream, n1, sd1, 0.7), normals(stream, n2, sd2)];
			const [pooled, welch] = [
				t.testTwoSample(a, b, { nullValue: 0.7 }),
				t.testWelch(a, b, { nullValue: 0.7 })
			];
			return {
				pooled: reject(pooled),
				welch: reject(welch),
				pooledCovers: covers(pooled, 0.7),
				welchCovers: covers(welch, 0.7)
			};
		});
	}

	function threeGroups(replicates, sizes, sds) {
		return count(replicates, (stream) => {
			const got = analyseOneWay(sizes.map((n, i) => normals(stream, n, sds[i])));
			return { plain: got.test.p < 0.05, welch: got.welch.p < 0.05 };
		});
	}

	function dunnett(replicates, sizes, sides) {
		const [control, ...treatments] = sizes;
		const df = sizes.reduce((sum, n) => sum + n, 0) - sizes.length;
		const loadings = computeLoadings(treatments, control);
		const critical = computeDunnettCritical(0.05, { loadings, df, sides });
		return count(replicates, (stream) => {
			const groups = sizes.map((n) => t.summarise(normals(stream, n)));
			const square = groups.reduce((sum, g) => sum + g.sumOfSquares, 0) / df;
			const values = groups
				.slice(1)
				.map((g) => (g.mean - groups[0].mean) / Math.sqrt(square * (1 / g.n + 1 / control)));
			const largest = Math.max(...values.map((v) => (sides === 2 ? Math.abs(v) : v)));
			return { any: largest > critical };
		});
	}

	/** People whose measurements follow an autoregression (correlation rho at distance 1). */
	function mixedAnova(replicates, sizes, m, rho, kind) {
		return count(replicates, (stream) => {
			const people = sizes.flatMap((n, group) =>
				Array.from({ length: n }, () => {
					const shared = drawNormal(stream);
					const values = [];
					for (let j = 0; j < m; j += 1) {
						const fresh = drawNormal(stream);
						if (kind === 'alike') values.push(Math.sqrt(rho) * shared + Math.sqrt(1 - rho) * fresh);
						else
							values.push(j === 0 ? fresh : rho * values[j - 1] + Math.sqrt(1 - rho * rho) * fresh);
					}
					return { group, values };
				})
			);
			const { interaction, within, between } = analyseMixed(people);
			return {
				between: between.p < 0.05,
				within: within.greenhouseGeisser.p < 0.05,
				plain: interaction.p < 0.05,
				greenhouseGeisser: interaction.greenhouseGeisser.p < 0.05,
				huynhFeldt: interaction.huynhFeldt.p < 0.05
			};
		});
	}

	function covariance(replicates, n1, n2) {
		return count(replicates, (stream) => {
			const x = normals(stream, n1 + n2);
			const y = x.map((value) => 0.6 * value + 0.8 * drawNormal(stream));
			const group = x.map((_, i) => (i < n1 ? 0 : 1));
			const got = analyseCovariance({ y, group, covariates: [x] });
			return { test: got.groups.p < 0.05, covers: covers(got.differences[0], 0) };
		});
	}

	function equivalence(replicates, n1, n2, sd1, sd2) {
		return count(replicates, (stream) => {
			const [a, b] = [normals(stream, n1, sd1, 1), normals(stream, n2, sd2)];
			const options = { lowerMargin: -1, upperMargin: 1, alpha: 0.05 };
			return {
				pooled: testEquivalence(a, b, { ...options, design: 'pooled' }).isEquivalent,
				welch: testEquivalence(a, b, { ...options, design: 'welch' }).isEquivalent
			};
		});
	}

	function shares(replicates, p, n1, n2) {
		return count(replicates, (stream) => {
			const draw = (n) =>
				Array.from({ length: n }, () => drawUniform(stream) < p).filter(Boolean).length;
			const got = compareProportions({ successes: [draw(n1), draw(n2)], trials: [n1, n2] });
			const { differenceInterval: d, oddsRatioInterval: o } = got;
			return {
				score: got.score !== null && got.score.p < 0.05,
				fisher: got.fisherP < 0.05,
				differenceCovers: d.lower <= 0 && 0 <= d.upper,
				oddsCovers: o.lower <= 1 && 1 <= o.upper
			};
		});
	}

	/** Day-by-arm interaction with dropout of 3 % a day. */
	function mixedModel(replicates, n1, n2, slopeSd) {
		return count(replicates, (stream) => {
			const rows = [];
			for (let person = 0; person < n1 + n2; person += 1) {
				const [level, slope] = [0.5 * drawNormal(stream), slopeSd * drawNormal(stream)];
				for (let day = 0; day < 7; day += 1) {
					if (day > 0 && drawUniform(stream) < 0.03) break;
					rows.push([
						level + (slope - 0.1) * day + 0.4 * drawNormal(stream),
						day,
						person < n1 ? 0 : 1,
						person
					]);
				}
			}
			const column = (read) => rows.map(read);
			const [ones, day] = [column(() => 1), column((r) => r[1])];
			const fit = fitMixedModel(
				{
					y: column((r) => r[0]),
					fixed: [ones, day, column((r) => r[2]), column((r) => r[1] * r[2])],
					random: [ones, day],
					group: column((r) => r[3])
				},
				'REML'
			);
			if (!fit.ok)
				return {
					failed: true,
					singular: false,
					wald: false,
					satterthwaite: false,
					kenwardRoger: false
				};
			const contrast = [0, 0, 0, 1];
			const value = fit.coefficients[3] / Math.sqrt(fit.covariance[3][3]);
			const p = (ratio, df) => 2 * computeStudentTSurvival(Math.abs(ratio), df);
			const kr = computeKenwardRoger(fit.solution);
			const krP = kr.ok
				? p(fit.coefficients[3] / Math.sqrt(kr.covariance[3][3]), kr.test([contrast]).df)
				: 1;
			return {
				failed: false,
				singular: fit.isSingular,
				wald: 2 * computeNormalSurvival(Math.abs(value)) < 0.05,
				satterthwaite: p(value, createSatterthwaite(fit.solution)(contrast)) < 0.05,
				kenwardRoger: krP < 0.05
			};
		});
	}

	function reestimation(replicates, interim, sd) {
		return count(replicates, (stream) => {
			const [a, b] = [normals(stream, interim, sd), normals(stream, interim, sd)];
			const plan = { difference: 1.5, alpha: 0.05, power: 0.8, plannedPerGroup: interim };
			const got = reestimateBlinded({ ...plan, pooledValues: [...a, ...b] });
			const more = Math.min(400, got.perGroup) - interim;
			return {
				test: reject(
					t.testTwoSample(
						[...a, ...normals(stream, more, sd)],
						[...b, ...normals(stream, more, sd)]
					)
				)
			};
		});
	}

	function sequential(replicates, kind, information) {
		const looks = computeBoundaries({
			spending: { kind },
			alphaPerSide: 0.025,
			information,
			sides: 2
		});
		return count(replicates, (stream) => {
			let [score, before, crossed] = [0, 0, false];
			for (const look of looks) {
				score += Math.sqrt(look.information - before) * drawNormal(stream);
				before = look.information;
				if (Math.abs(score) / Math.sqrt(look.information) >= look.z) crossed = true;
			}
			return { test: crossed };
		});
	}

	return {
		...{ twoGroups, threeGroups, dunnett, mixedAnova, covariance, equivalence, shares },
		...{ mixedModel, reestimation, sequential }
	};
}
