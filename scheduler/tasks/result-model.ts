import { norm, type Vector } from '../linear-algebra/vector.ts';
import type { InvalidReason, Task } from './task.ts';

/** The part of a task that its model computes. */
export type ResultModel = Pick<
	Task,
	| 'resultCount'
	| 'evaluate'
	| 'gradient'
	| 'results'
	| 'jacobian'
	| 'findInvalid'
	| 'resultRounding'
	| 'assess'
>;

/** A model of one result. */
export function createSingleResult(model: {
	evaluate(x: Vector): number;
	gradient(x: Vector): number[];
	findInvalid?(x: Vector): InvalidReason | null;
}): ResultModel {
	const { evaluate, gradient } = model;
	return {
		...{ resultCount: 1, evaluate, gradient },
		results: (x) => [evaluate(x)],
		jacobian: (x) => [gradient(x)],
		findInvalid: (x) =>
			model.findInvalid?.(x) ?? (Number.isFinite(evaluate(x)) ? null : 'no-result')
	};
}

/**
 * A model of several results in one unit; its one number is their distance from 0, whose derivative at
 * a solution itself, where it has none, is given as 0.
 */
export function createSeveralResults(model: {
	resultCount: number;
	results(x: Vector): number[];
	jacobian(x: Vector): number[][];
	findInvalid?(x: Vector): InvalidReason | null;
}): ResultModel {
	const { resultCount, results, jacobian } = model;
	return {
		...{ resultCount, results, jacobian },
		evaluate: (x) => norm(results(x)),
		gradient: (x) => {
			const miss = results(x);
			const distance = norm(miss);
			if (distance === 0) return x.map(() => 0);
			return x.map(
				(_, i) =>
					jacobian(x).reduce((sum, row, k) => sum + (miss[k] ?? 0) * (row[i] ?? 0), 0) / distance
			);
		},
		findInvalid: (x) =>
			model.findInvalid?.(x) ?? (results(x).every(Number.isFinite) ? null : 'no-result')
	};
}
