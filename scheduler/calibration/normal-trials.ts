import { add, multiplyVector, type Matrix, type Vector } from '../linear-algebra/vector.ts';
import { drawNormal, type Uint32Stream } from '../random/random-stream.ts';

/** A normal population of executions, and how much of each trial carries over to the next. */
export interface Population {
	readonly mean: Vector;
	/** L with L·Lᵀ = covariance. */
	readonly lower: Matrix;
	/** Lag-1 correlation. */
	readonly carry: number;
}

/** Trials of a population in their order; stationary from the first on. */
export function drawTrials(
	stream: Uint32Stream,
	count: number,
	population: Population
): number[][] {
	const { mean, lower, carry } = population;
	const draw = () => lower.map(() => drawNormal(stream));
	let last = draw();
	return Array.from({ length: count }, (_, i) => {
		if (i > 0) {
			const fresh = draw();
			const kept = Math.sqrt(1 - carry * carry);
			last = last.map((value, axis) => carry * value + kept * (fresh[axis] ?? 0));
		}
		return add(mean, multiplyVector(lower, last));
	});
}
