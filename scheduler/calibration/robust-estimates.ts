import { scaleMatrix } from '../linear-algebra/matrix.ts';
import type { Matrix } from '../linear-algebra/vector.ts';
import { createSeededStreams } from '../random/seeded-stream.ts';
import { computeLogVolumeRatio } from '../variability/covariance-distance.ts';
import { estimateMcd } from '../variability/estimate-mcd.ts';
import { estimateOgk } from '../variability/estimate-ogk.ts';
import { flagOutliers } from '../variability/flag-outliers.ts';
import { computeCovariance, computeMean, computeMeanVector } from '../variability/moments.ts';
import { trimOutliers } from '../variability/trim-outliers.ts';
import { writeTable } from './markdown-table.ts';
import { drawTrials } from './normal-trials.ts';

const SEED = 33;
const STRAY_SHARE = 0.1;

type Estimate = { ok: true; mean: Matrix[number]; covariance: Matrix } | { ok: false };

const METHODS: Readonly<Record<string, (trials: Matrix) => Estimate>> = {
	plain: (trials) => ({
		...{ ok: true, mean: computeMeanVector(trials), covariance: computeCovariance(trials) }
	}),
	trimmed: trimOutliers,
	'closest half': (trials) => estimateMcd(trials, { startCount: 100 }),
	'by pairs': (trials) => {
		const cloud = estimateOgk(trials);
		if (!cloud.ok) return cloud;
		return { ...cloud, covariance: scaleMatrix(cloud.covariance, cloud.consistency) };
	}
};

/**
 * Area of each estimate against that of the population, and how many good and stray trials it flags.
 *
 * Method:  two variables, seeded samples; strays lie 8 SD away on one side. Geometric mean of the areas.
 */
export function calibrateRobust(runs: number): string {
	const settings = [20, 60].flatMap((n) => [0, STRAY_SHARE].map((strays) => ({ n, strays })));
	const rows = Object.entries(METHODS).flatMap(([name, estimate]) =>
		settings.map(({ n, strays }) => [name, n, strays, ...judge(estimate, n, strays, runs)])
	);
	return writeTable(
		['estimate', 'trials', 'stray share', 'area ÷ true area', 'good flagged', 'strays flagged'],
		rows
	);
}

function judge(
	estimate: (trials: Matrix) => Estimate,
	n: number,
	strayShare: number,
	runs: number
): string[] {
	const strayCount = Math.round(n * strayShare);
	const population = {
		...{ mean: [0, 0], carry: 0 },
		lower: [
			[1, 0],
			[0, 1]
		]
	};
	const areas: number[] = [];
	const flagged = { good: 0, stray: 0 };
	for (const stream of createSeededStreams(SEED, 0, runs)) {
		const trials = drawTrials(stream, n, population).map(([x = 0, y = 0], i) =>
			i < strayCount ? [x + 8, y] : [x, y]
		);
		const cloud = estimate(trials);
		if (!cloud.ok) continue;
		areas.push(computeLogVolumeRatio(population.lower, cloud.covariance));
		const { mean: center, covariance } = cloud;
		const flags = flagOutliers({ executions: trials, center, covariance });
		(flags.ok ? flags.isOutlier : []).forEach((isFlagged, i) => {
			if (isFlagged) flagged[i < strayCount ? 'stray' : 'good']++;
		});
	}
	const part = (count: number, of: number) => (of > 0 ? (count / (of * runs)).toFixed(3) : '–');
	return [
		Math.exp(computeMean(areas)).toFixed(2),
		part(flagged.good, n - strayCount),
		part(flagged.stray, strayCount)
	];
}
