import { crossProduct, scaleMatrix } from '../linear-algebra/matrix.ts';
import { computeTrace } from '../linear-algebra/symmetric-function.ts';
import { dot, row, type Matrix } from '../linear-algebra/vector.ts';
import { centerExecutions } from './moments.ts';

export interface ShrunkCovariance {
	/** 0 keeps the sample covariance, 1 leaves a round cloud of the same mean variance. */
	readonly shrinkage: number;
	readonly covariance: readonly (readonly number[])[];
	/** The covariance before, divisor n. */
	readonly sample: readonly (readonly number[])[];
}

/**
 * Covariance of few trials, drawn towards a round cloud as far as its own noise asks (Ledoit-Wolf).
 *
 * Shapes:  executions (trials × d), trials >= 2, in scaled coordinates: the target is μ·I.
 * Method:  (1 − s)·S + s·μ·I with S of divisor n, μ = tr S / d and the least expected square error s.
 * Source:  Ledoit & Wolf 2004, J Multivar Anal 88:365; method sheet B4; case shrink-small8x3
 *          (scikit-learn 1.2.1). Accuracy: relative 1e-10.
 * @throws {RangeError} fewer than two trials
 */
export function shrinkCovariance(executions: Matrix): ShrunkCovariance {
	const { centered, sample, n, d } = prepare(executions);
	const mu = computeTrace(sample) / d;
	const squares = dot(sample.flat(), sample.flat());
	const fourth = centered.reduce((sum, rest) => sum + dot(rest, rest) ** 2, 0);
	const noise = (fourth / n - squares) / (n * d);
	const distance = squares / d - mu * mu;
	return blend(sample, mu, distance > 0 ? Math.min(Math.max(noise, 0), distance) / distance : 1);
}

/**
 * Covariance of few trials, drawn towards a round cloud under the assumption of normal trials; shrinks
 * more than {@link shrinkCovariance}.
 *
 * Shapes:  executions (trials × d), trials >= 2, in scaled coordinates.
 * Method:  oracle approximating shrinkage, divisor n.
 * Source:  Chen, Wiesel, Eldar & Hero 2010, IEEE Trans Signal Process 58:5016; case shrink-small8x3
 *          (scikit-learn 1.2.1). Accuracy: relative 1e-10.
 * @throws {RangeError} fewer than two trials
 */
export function shrinkCovarianceOracle(executions: Matrix): ShrunkCovariance {
	const { sample, n, d } = prepare(executions);
	const mu = computeTrace(sample) / d;
	const meanSquare = dot(sample.flat(), sample.flat()) / (d * d);
	const denominator = (n + 1) * (meanSquare - (mu * mu) / d);
	return blend(sample, mu, denominator > 0 ? Math.min(1, (meanSquare + mu * mu) / denominator) : 1);
}

function prepare(executions: Matrix) {
	const n = executions.length;
	if (n < 2) throw new RangeError('a shrunk covariance requires at least two trials');
	const centered = centerExecutions(executions);
	const sample = scaleMatrix(crossProduct(centered), 1 / n);
	return { centered, sample, n, d: row(executions, 0).length };
}

function blend(sample: Matrix, mu: number, shrinkage: number): ShrunkCovariance {
	const covariance = sample.map((values, i) =>
		values.map((value, j) => (1 - shrinkage) * value + (i === j ? shrinkage * mu : 0))
	);
	return { shrinkage, covariance, sample };
}
