import { bench, describe } from 'vitest';
import { fitMixedModel } from '../../scheduler/analysis/mixed-model/fit-mixed-model.ts';
import type { MixedModelData } from '../../scheduler/analysis/mixed-model/model-sums.ts';
import { createSatterthwaite } from '../../scheduler/analysis/mixed-model/satterthwaite.ts';
import { computeBoundaries } from '../../scheduler/power/group-sequential.ts';
import { computeTwoSampleTPower } from '../../scheduler/power/two-sample-t.ts';
import { computeWelchPower } from '../../scheduler/power/welch-power.ts';
import { drawNormal, drawUniform } from '../../scheduler/random/random-stream.ts';
import { createSeededStream } from '../../scheduler/random/seeded-stream.ts';
import { computeDunnettCritical } from '../../scheduler/statistics/dunnett.ts';

/** Two arms of 20 people on seven days, with 3 % leaving a day. */
function simulate(seed: number): MixedModelData {
	const stream = createSeededStream(seed);
	const rows: [number, number, number, number][] = [];
	for (let person = 0; person < 40; person += 1) {
		const [level, slope] = [0.5 * drawNormal(stream), 0.1 * drawNormal(stream)];
		for (let day = 0; day < 7; day += 1) {
			if (day > 0 && drawUniform(stream) < 0.03) break;
			const y = level + (slope - 0.1) * day + 0.4 * drawNormal(stream);
			rows.push([y, day, person < 20 ? 0 : 1, person]);
		}
	}
	const [ones, day] = [rows.map(() => 1), rows.map((row) => row[1])];
	const both = rows.map((row) => row[1] * row[2]);
	return {
		y: rows.map((row) => row[0]),
		fixed: [ones, day, rows.map((row) => row[2]), both],
		random: [ones, day],
		group: rows.map((row) => row[3])
	};
}

const studies = Array.from({ length: 50 }, (_, seed) => simulate(seed));
let next = 0;
const pick = () => studies[(next += 1) % studies.length] ?? simulate(0);

describe('mixed model of 40 people and 7 days, day by arm, by REML', () => {
	bench('random intercept and slope: a fit from raw rows', () => {
		const fit = fitMixedModel(pick(), 'REML');
		if (!fit.ok) throw new Error(fit.reason);
	});
	bench('the same with Satterthwaite’s test of the interaction', () => {
		const fit = fitMixedModel(pick(), 'REML');
		if (!fit.ok) throw new Error(fit.reason);
		createSatterthwaite(fit.solution)([0, 0, 0, 1]);
	});
	bench('random intercept only', () => {
		const study = pick();
		const fit = fitMixedModel({ ...study, random: study.random.slice(0, 1) }, 'REML');
		if (!fit.ok) throw new Error(fit.reason);
	});
});

describe('planning', () => {
	const design = { alpha: 0.05, sides: 2, n1: 30, n2: 30 } as const;
	bench('power of a two-sample t test', () => {
		computeTwoSampleTPower({ ...design, effectSize: 0.6 });
	});
	bench('exact power of Welch’s test', () => {
		computeWelchPower({ ...design, difference: 0.6, sd1: 1, sd2: 2 });
	});
	bench('boundaries of five looks', () => {
		const spending = { kind: 'obrien-fleming' } as const;
		const information = [0.2, 0.4, 0.6, 0.8, 1];
		computeBoundaries({ spending, alphaPerSide: 0.025, information, sides: 2 });
	});
	bench('Dunnett’s critical value, three treatments', () => {
		computeDunnettCritical(0.05, { loadings: [0.7, 0.7, 0.7], df: 20, sides: 2 });
	});
});
