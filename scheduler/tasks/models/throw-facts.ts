interface ThrowPlace {
	/** Release height, m. */
	readonly h: number;
	/** Distance of the plane, m. */
	readonly D: number;
	/** Height of the target, m. */
	readonly H: number;
	/** Gravity, m/s². */
	readonly g: number;
}

/**
 * Speed that hits the target at a given angle.
 *
 * Units:   angle degrees, speed m/s.
 * Method:  v = √(g·D² / (2·cos²θ·(h − H + D·tan θ))).
 * Source:  method sheet A3; case projectile-manifold, 1e-8.
 */
export function computeThrowSpeed(
	{ h, D, H, g }: ThrowPlace,
	thetaDeg: number
): { ok: true; speed: number } | { ok: false; reason: 'angle-cannot-reach' } {
	const theta = (thetaDeg * Math.PI) / 180;
	const rise = h - H + D * Math.tan(theta);
	if (!(Math.abs(thetaDeg) < 90 && rise > 0)) return { ok: false, reason: 'angle-cannot-reach' };
	return { ok: true, speed: Math.sqrt((g * D ** 2) / (2 * Math.cos(theta) ** 2 * rise)) };
}

/**
 * The slowest throw that hits; there the result does not depend on the angle, to first order.
 *
 * Units:   speed m/s, angle degrees.
 * Method:  v² = g·(q + √(D² + q²)), tan θ = (q + √(D² + q²))/D, q = H − h.
 * Source:  method sheet A3; case projectile-manifold, 1e-8.
 */
export function computeSlowestThrow({ h, D, H, g }: ThrowPlace): {
	speed: number;
	thetaDeg: number;
} {
	const q = H - h;
	const reach = q + Math.hypot(D, q);
	return { speed: Math.sqrt(g * reach), thetaDeg: (Math.atan2(reach, D) * 180) / Math.PI };
}

/**
 * How far a throw comes before it is down at a height; null: it does not come so high.
 *
 * Units:   speed m/s, angle degrees, m.
 * Method:  R = (v·cos θ/g)·(v·sin θ + √(v²·sin²θ + 2g(h − H))).
 * Source:  method sheet A3.
 */
export function computeRange(
	{ h, H, g }: Omit<ThrowPlace, 'D'>,
	speed: number,
	thetaDeg: number
): number | null {
	const theta = (thetaDeg * Math.PI) / 180;
	const rise = speed * Math.sin(theta);
	const square = rise ** 2 + 2 * g * (h - H);
	if (square < 0) return null;
	return ((speed * Math.cos(theta)) / g) * (rise + Math.sqrt(square));
}
