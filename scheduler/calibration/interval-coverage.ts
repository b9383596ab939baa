import type { Matrix } from '../linear-algebra/vector.ts';
import { createSeededStreams } from '../random/seeded-stream.ts';
import { drawResamples, shapeOf, summariseReplicates } from '../variability/block-bootstrap.ts';
import { computeCloudAlignment } from '../variability/cloud-alignment.ts';
import { decomposeImprovement } from '../variability/decompose-improvement.ts';
import { computeGoalSensitivity } from '../variability/goal-sensitivity.ts';
import { computeCovariance } from '../variability/moments.ts';
import { computeManifoldVariance } from '../variability/uncontrolled-manifold.ts';
import { writeShare, writeTable } from './markdown-table.ts';
import { drawTrials } from './normal-trials.ts';

const SEED = 32;
const LEVEL = 0.95;
const REPLICATES = 200;

/** Sum of two variables; SD 1 along and .5 across the solutions, then a better block. */
const J = [[1, 1]];
const ROOT = Math.SQRT1_2;
const WIDE = [
	[ROOT, 0.5 * ROOT],
	[-ROOT, 0.5 * ROOT]
];
const NARROW = WIDE.map((values) => values.map((value) => value * 0.7));
const squared = ([x = 0, y = 0]: readonly number[]) => (x + y) ** 2;

/** What is measured, and its value in the population. */
const TRUTHS = {
	'log ratio along : across': Math.log(4),
	'alignment factor': Math.sqrt(0.25 / 1.25),
	// To the first axis; the angle to the solutions is never below 0, so no interval of it could hold 0.
	'angle of the major axis': 45,
	// Squared error of a linear task: places 1 and 0, traces 1.25 and .49 · 1.25, covariances −.375 and .49 times that.
	'tolerance in the improvement': 1,
	'noise in the improvement': 1.25 * 0.51,
	'covariation in the improvement': 2 * -0.375 * 0.51
};
type Name = keyof typeof TRUTHS;
type Values = Readonly<Record<Name, number | null>>;
const NAMES: readonly Name[] = [
	...(['log ratio along : across', 'alignment factor', 'angle of the major axis'] as const),
	...(['tolerance in the improvement', 'noise in the improvement'] as const),
	'covariation in the improvement'
];

function measureAll([before = [], after = []]: readonly Matrix[]): Values {
	const covariance = computeCovariance(before);
	const ratio = computeManifoldVariance(before, J);
	const goal = computeGoalSensitivity(covariance, J);
	const lie = computeCloudAlignment(covariance, [[1, 0]]);
	const parts = decomposeImprovement(before, after, squared);
	return {
		'log ratio along : across': ratio.ok ? ratio.logRatio : null,
		'alignment factor': goal.ok ? goal.alignmentFactor : null,
		'angle of the major axis': lie.ok ? lie.angleDeg : null,
		'tolerance in the improvement': parts.ok ? parts.shapley.tolerance : null,
		'noise in the improvement': parts.ok ? parts.shapley.noise : null,
		'covariation in the improvement': parts.ok ? parts.covariation : null
	};
}

/**
 * How often the block-bootstrap interval of each measure holds the value of the population.
 *
 * Method:  seeded samples of a normal population, runs of five, 200 replicates, 95 % percentile intervals.
 */
export function calibrateIntervals(runs: number): string {
	const settings = [20, 60].flatMap((n) => [0, 0.3].map((carry) => ({ n, carry })));
	const counts = settings.map((setting) => countHeld(setting, runs));
	const rows = NAMES.map((name) => [
		name,
		...counts.map((held) => writeShare(held[name] ?? 0, runs))
	]);
	const headings = settings.map(({ n, carry }) => `${n} trials, lag-1 ${carry}`);
	return writeTable(['95 % interval of', ...headings], rows);
}

function countHeld(
	{ n, carry }: { n: number; carry: number },
	runs: number
): Readonly<Record<string, number>> {
	const held: Record<string, number> = {};
	createSeededStreams(SEED, 0, runs).forEach((stream, seed) => {
		const blocks = [
			drawTrials(stream, n, { mean: [0.5, 0.5], lower: WIDE, carry }),
			drawTrials(stream, n, { mean: [0, 0], lower: NARROW, carry })
		];
		const made = measureAll(blocks);
		const drawn = Array.from(drawResamples({ blocks, seed }, 0, REPLICATES), measureAll);
		for (const name of NAMES) {
			const values = drawn.map((values) => values[name]);
			const found = summariseReplicates(made[name] ?? 0, values, {
				level: LEVEL,
				...shapeOf({ blocks })
			});
			const isHeld = found.ok && found.low <= TRUTHS[name] && TRUTHS[name] <= found.high;
			held[name] = (held[name] ?? 0) + (isHeld ? 1 : 0);
		}
	});
	return held;
}
