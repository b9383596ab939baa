import { computeCholesky, solveWithCholesky } from '../linear-algebra/cholesky.ts';
import { combineMatrices } from '../linear-algebra/matrix.ts';
import { dot, norm, subtract, type Matrix, type Vector } from '../linear-algebra/vector.ts';

/** {x: (x − center)ᵀ·shape⁻¹·(x − center) ≤ 1}. */
export interface EllipsoidShape {
	center: Vector;
	shape: Matrix;
}

export interface Separation {
	/** Least K(s); the ellipsoids are apart exactly when it is negative. */
	kMin: number;
	/** Factor on both ellipsoids at which they just touch; above 1 they are apart. */
	touchingScale: number;
}

const GOLDEN = (Math.sqrt(5) - 1) / 2;
const ROUNDS = 80;

/**
 * Whether two ellipsoids are apart, and by which factor they may grow until they touch.
 *
 * Shapes:  centers (d), shapes A₁, A₂ (d × d), positive definite.
 * Method:  K(s) = 1 − δᵀ·[A₁/(1−s) + A₂/s]⁻¹·δ is convex on (0, 1); golden section, 80 rounds.
 *          Touching scale √(1 − min K).
 * Source:  Gilitschenski & Hanebeck 2012; method sheet B6; cases separation-*. Accuracy: 1e-9.
 */
export function computeSeparation(first: EllipsoidShape, second: EllipsoidShape): Separation {
	const delta = subtract(second.center, first.center);
	if (norm(delta) === 0) return { kMin: 1, touchingScale: 0 };
	const gain = (s: number) => gainAt(s, first.shape, second.shape, delta);
	const best = maximise(gain);
	return { kMin: 1 - best, touchingScale: Math.sqrt(best) };
}

/** δᵀ·[A₁/(1−s) + A₂/s]⁻¹·δ. */
function gainAt(s: number, A1: Matrix, A2: Matrix, delta: Vector): number {
	const factor = computeCholesky(combineMatrices([A1, A2], [1 / (1 - s), 1 / s]));
	if (!factor.ok) throw new RangeError('an ellipsoid needs a positive definite shape');
	return dot(delta, solveWithCholesky(factor.lower, delta));
}

function maximise(gain: (s: number) => number): number {
	let [low, high] = [1e-9, 1 - 1e-9];
	let [left, right] = [high - GOLDEN * (high - low), low + GOLDEN * (high - low)];
	let [atLeft, atRight] = [gain(left), gain(right)];
	for (let round = 0; round < ROUNDS; round++) {
		if (atLeft > atRight) {
			[high, right, atRight] = [right, left, atLeft];
			left = high - GOLDEN * (high - low);
			atLeft = gain(left);
		} else {
			[low, left, atLeft] = [left, right, atRight];
			right = low + GOLDEN * (high - low);
			atRight = gain(right);
		}
	}
	return Math.max(atLeft, atRight);
}
