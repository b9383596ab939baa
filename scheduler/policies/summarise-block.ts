import { combineMatrices, scaleMatrix, transpose } from '../linear-algebra/matrix.ts';
import { scale, add, type Matrix } from '../linear-algebra/vector.ts';
import type { ScaledTask } from '../tasks/scaled-task.ts';
import {
	computeCovariance,
	computeMean,
	computeMeanVector,
	computeStandardDeviation
} from '../variability/moments.ts';
import { estimateLagOne, estimateRobustSd } from '../variability/serial-dependence.ts';
import type { BlockSummary, ReferenceCloud } from './policy-memory.ts';

/**
 * What a block showed: its cloud, its errors, its hits.
 *
 * Shapes:  executions (trials × d), scaled, at least 3, each with a result.
 */
export function summariseBlock(task: ScaledTask, executions: Matrix): BlockSummary {
	const results = executions.map((z) => task.evaluate(z));
	const costs = results.map(Math.abs);
	return {
		n: executions.length,
		mean: computeMeanVector(executions),
		cov: computeCovariance(executions),
		cost: computeMean(costs),
		costSd: computeStandardDeviation(costs),
		fMean: computeMean(results),
		fSd: estimateRobustSd(results),
		hit: costs.filter((cost) => cost <= task.tolerance).length / costs.length,
		r: estimateLagOne([...transpose(executions), results])
	};
}

/** Several blocks as one cloud: weighted mean, pooled covariance. */
export function poolBlocks(blocks: readonly BlockSummary[]): ReferenceCloud {
	const [first] = blocks;
	if (!first) throw new RangeError('poolBlocks requires at least one block');
	const n = blocks.reduce((sum, block) => sum + block.n, 0);
	const total = blocks.reduce<number[]>(
		(sum, block) => add(sum, scale(block.mean, block.n)),
		first.mean.map(() => 0)
	);
	const freedom = blocks.map((block) => block.n - 1);
	return {
		n,
		blocks: blocks.length,
		mean: scale(total, 1 / n),
		cov: scaleMatrix(
			combineMatrices(
				blocks.map(({ cov }) => cov),
				freedom
			),
			1 / freedom.reduce((sum, value) => sum + value, 0)
		),
		r: computeMean(blocks.map(({ r }) => r))
	};
}
