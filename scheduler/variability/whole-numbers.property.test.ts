import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { anyShape } from '../../tests/support/variability/any-trials.ts';
import { bootstrapInterval } from './block-bootstrap.ts';
import { computeCloudAlignment } from './cloud-alignment.ts';
import { computeCloudOverlap } from './cloud-overlap.ts';
import { decomposeImprovement } from './decompose-improvement.ts';
import { computeEllipseIntersection } from './ellipse-intersection.ts';
import { computeSeparation } from './ellipsoid-separation.ts';
import { estimateMcd } from './estimate-mcd.ts';
import { estimateOgk } from './estimate-ogk.ts';
import { flagOutliers } from './flag-outliers.ts';
import { computeFluctuationExponent, computeLagOne } from './fluctuation-analysis.ts';
import { computeGoalSensitivity } from './goal-sensitivity.ts';
import { computeMassInside } from './mass-inside.ts';
import { computeCovariationIndex } from './mean-cost.ts';
import { computeCovariance, computeMeanVector } from './moments.ts';
import { pairBetter } from './pair-better.ts';
import { estimateQn, estimateTau } from './scale-estimates.ts';
import { shrinkCovariance, shrinkCovarianceOracle } from './shrink-covariance.ts';
import { computeManifoldVariance } from './uncontrolled-manifold.ts';
import { computeVariabilityCosts } from './variability-costs.ts';

/** Trials with many equal values, on lines, all the same, tiny or huge. */
const oddTrials = fc
	.tuple(
		fc.array(fc.tuple(fc.integer({ min: -2, max: 2 }), fc.integer({ min: -2, max: 2 })), {
			minLength: 8,
			maxLength: 14
		}),
		fc.constantFrom(1, 1e-80, 1e80, 1e-12),
		fc.constantFrom('both', 'line', 'constant')
	)
	.map(([list, size, kind]) =>
		list.map(([x, y]) => [x * size, (kind === 'both' ? y : kind === 'line' ? 2 * x : 1) * size])
	);

function findNaN(value: unknown, path: string): string[] {
	if (typeof value === 'number') return Number.isNaN(value) ? [path] : [];
	if (value === undefined) return [`${path} (undefined)`];
	if (typeof value !== 'object' || value === null) return [];
	return Object.entries(value).flatMap(([name, inside]) => findNaN(inside, `${path}.${name}`));
}

/** The answer, or the name of the error that a caller's mistake may throw. */
function attempt(compute: () => unknown): unknown {
	try {
		return compute();
	} catch (error) {
		if (error instanceof RangeError) return error.name;
		throw error;
	}
}

describe('no NaN leaves a measure', () => {
	it('whatever the trials are', { timeout: 60_000 }, () => {
		fc.assert(
			fc.property(oddTrials, oddTrials, (a, b) => {
				const J = [[1, 1]];
				const cost = (x: readonly number[]) => Math.abs((x[0] ?? 0) + (x[1] ?? 0));
				const [A, B] = [computeCovariance(a), computeCovariance(b)];
				const [one, two] = [a, b].map(computeMeanVector);
				const [m = [], n = []] = [one, two];
				const ranges = [
					{ min: -1e81, max: 1e81 },
					{ min: -1e81, max: 1e81 }
				];
				const answers: Record<string, () => unknown> = {
					overlap: () =>
						computeCloudOverlap({ mean: m, covariance: A }, { mean: n, covariance: B }),
					area: () => computeEllipseIntersection({ center: m, shape: A }, { center: n, shape: B }),
					separation: () => computeSeparation({ center: m, shape: A }, { center: n, shape: B }),
					mass: () => computeMassInside({ mean: m, covariance: A, center: n, shape: B }),
					mcd: () => estimateMcd(a, { startCount: 5 }),
					ogk: () => estimateOgk(a),
					flags: () => flagOutliers({ executions: b, center: m, covariance: A }),
					tau: () => a.map(estimateTau),
					qn: () => a.map(estimateQn),
					shrunk: () => [shrinkCovariance(a), shrinkCovarianceOracle(a)],
					parts: () => decomposeImprovement(a, b, cost),
					costs: () => computeVariabilityCosts(a, cost, { ranges, gridSteps: 5 }),
					index: () => computeCovariationIndex(a, (x) => (x[0] ?? 0) - (x[1] ?? 0)),
					pairs: () => pairBetter(a, cost),
					ucm: () => computeManifoldVariance(a, J),
					goal: () => computeGoalSensitivity(A, J),
					alignment: () => computeCloudAlignment(A, [[1, -1]]),
					lagOne: () => computeLagOne(a.map(([x = 0]) => x)),
					exponent: () => computeFluctuationExponent([...a, ...b, ...a].map(([x = 0]) => x)),
					interval: () =>
						bootstrapInterval({
							...{ blocks: [a], seed: 1, replicateCount: 20 },
							measure: ([trials = []]) => {
								const found = computeManifoldVariance(trials, J);
								return found.ok ? { ok: true, value: found.logRatio } : found;
							}
						})
				};
				const faults = Object.entries(answers).flatMap(([name, compute]) =>
					findNaN(attempt(compute), name)
				);
				expect(faults).toEqual([]);
			}),
			{ numRuns: 30 }
		);
	});
});

describe('computeSeparation', () => {
	it('agrees with the least of the larger of both distances as a zoom finds it', () => {
		const place = fc.double({ min: -6, max: 6, noNaN: true });
		fc.assert(
			fc.property(anyShape, anyShape, place, place, (A, B, x, y) => {
				fc.pre(Math.hypot(x, y) > 0.1);
				const { touchingScale } = computeSeparation(
					{ center: [0, 0], shape: A },
					{ center: [x, y], shape: B }
				);
				const squares = [A, B].map((shape) => {
					const [[a = 0, b = 0] = [], [, d = 0] = []] = shape;
					const det = a * d - b * b;
					return (u: number, v: number) => (d * u * u - 2 * b * u * v + a * v * v) / det;
				});
				const larger = ([u, v]: readonly [number, number]) =>
					Math.max(squares[0]?.(u, v) ?? 0, squares[1]?.(u - x, v - y) ?? 0);
				// The larger of two convex functions is convex: zooming in finds its least value.
				let [best, least] = [[x / 2, y / 2] as const, Infinity];
				for (let reach = 8; reach > 1e-5; reach *= 0.7) {
					const [u, v] = best;
					for (let i = -10; i <= 10; i++)
						for (let j = -10; j <= 10; j++) {
							const at = [u + (reach * i) / 10, v + (reach * j) / 10] as const;
							if (larger(at) < least) [best, least] = [at, larger(at)];
						}
				}
				expect(Math.sqrt(least)).toBeGreaterThanOrEqual(touchingScale - 1e-9);
				expect(Math.sqrt(least)).toBeLessThan(1.01 * touchingScale + 1e-3);
			}),
			{ numRuns: 20 }
		);
	});
});
