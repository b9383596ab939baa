/** How the errors of one bounce of steady bouncing go over into the next. */
export interface BounceStability {
	readonly trace: number;
	readonly determinant: number;
	/** Real and imaginary parts of the two eigenvalues, ascending. */
	readonly real: readonly [number, number];
	readonly imaginary: readonly [number, number];
	readonly spectralRadius: number;
	readonly isComplex: boolean;
	readonly isStable: boolean;
}

/** Paddle accelerations at the meeting, m/s². */
export interface StableAccelerations {
	/** Bouncing is stable strictly between these two. */
	readonly stable: readonly [number, number];
	/** Between these two, errors die out fastest: both eigenvalues have size ε. */
	readonly fastest: readonly [number, number];
}

interface Bouncing {
	/** Coefficient of restitution ε. */
	readonly restitution: number;
	/** Gravity, m/s². */
	readonly g: number;
}

/**
 * Linear map of small errors of time and speed from one meeting to the next, in period-1 bouncing.
 *
 * Units:   acceleration of the paddle at the meeting m/s² (down is negative).
 * Method:  M = [[1, (1+ε)/g], [(1+ε)·a, ε² + (1+ε)²·a/g]]; eigenvalues from trace and determinant.
 * Source:  method sheet A2 (Schaal, Sternad & Atkeson 1996; Dijkstra et al. 2004). Accuracy: 1e-6, case
 *          paddle-eigenvalues.
 * @throws {RangeError} restitution outside 0 to 1 or gravity not positive
 */
export function computeBounceStability(
	{ restitution: e, g }: Bouncing,
	acceleration: number
): BounceStability {
	requireBouncing(e, g);
	const trace = 1 + e ** 2 + ((1 + e) ** 2 * acceleration) / g;
	const determinant = e ** 2;
	const square = trace ** 2 - 4 * determinant;
	const isComplex = square < 0;
	const root = Math.sqrt(Math.abs(square)) / 2;
	// The larger one first, the other from the determinant: nothing is lost where they differ much.
	const outer = trace / 2 + (trace < 0 ? -root : root);
	const inner = outer === 0 ? 0 : determinant / outer;
	const real: [number, number] = isComplex
		? [trace / 2, trace / 2]
		: [Math.min(outer, inner), Math.max(outer, inner)];
	const imaginary: [number, number] = isComplex ? [-root, root] : [0, 0];
	const spectralRadius = isComplex ? e : Math.max(Math.abs(outer), Math.abs(inner));
	const isStable = spectralRadius < 1;
	return { trace, determinant, real, imaginary, spectralRadius, isComplex, isStable };
}

/**
 * Accelerations that keep bouncing steady: −2g(1+ε²)/(1+ε)² < a < 0; fastest from −g to
 * −g·((1−ε)/(1+ε))².
 *
 * Source:  method sheet A2; case paddle-stability-bounds, 1e-9.
 * @throws {RangeError} restitution outside 0 to 1 or gravity not positive
 */
export function computeStableAccelerations({ restitution: e, g }: Bouncing): StableAccelerations {
	requireBouncing(e, g);
	return {
		stable: [(-2 * g * (1 + e ** 2)) / (1 + e) ** 2, 0],
		fastest: [-g, -g * ((1 - e) / (1 + e)) ** 2]
	};
}

/**
 * Period-1 bouncing to one apex: v⁻ = −v⁺, paddle speed v⁺·(1−ε)/(1+ε), period 2·v⁺/g.
 *
 * Units:   heights m above the same zero, speeds m/s, period s.
 * Source:  method sheet A2.
 */
export function computeSteadyBounce(
	{ restitution: e, g }: Bouncing,
	{ apex, impactHeight }: { apex: number; impactHeight: number }
):
	| { ok: true; ballSpeed: number; paddleSpeed: number; period: number }
	| { ok: false; reason: 'apex-below-paddle' } {
	requireBouncing(e, g);
	if (!(apex > impactHeight)) return { ok: false, reason: 'apex-below-paddle' };
	const speed = Math.sqrt(2 * g * (apex - impactHeight));
	const paddleSpeed = (speed * (1 - e)) / (1 + e);
	return { ok: true, ballSpeed: -speed, paddleSpeed, period: (2 * speed) / g };
}

function requireBouncing(restitution: number, g: number): void {
	if (!(restitution > 0 && restitution < 1))
		throw new RangeError(`restitution must lie between 0 and 1, is ${restitution}`);
	if (!(g > 0)) throw new RangeError(`gravity must be positive, is ${g}`);
}
