import type { TetheredBallRecord } from './tether-record.ts';
import { createTetherSwing } from './tether-swing.ts';

/** Whether some arm angle hits the target at any speed. */
export interface TetherAlignment {
	/** |e^{γπ/ω_d}·target + pivot|, m: equal to the arm where there is such an angle. */
	readonly number: number;
	/** The angle, degrees; null: there is none. */
	readonly freeAngleDeg: number | null;
	/** When the ball then passes the target, s after release. */
	readonly passTime: number;
}

/** Difference of alignment number and arm, as a share of the arm, that counts as equal. */
const EQUAL_SHARE = 1e-9;

/**
 * At t = π/ω_d the ball is at −e^{−γπ/ω_d}·r₀ whatever its speed: if that can be the target, the
 * manifold holds a whole line of that angle, on which the speed does not count and angle noise is all.
 *
 * Source:  method sheet A1; case tether-alignment-undamped, 1e-6.
 */
export function computeTetherAlignment(
	record: Pick<
		TetheredBallRecord,
		'k' | 'm' | 'relaxationTime' | 'window' | 'target' | 'pivot' | 'arm'
	>
): TetherAlignment {
	const { omegaD, gamma } = createTetherSwing(record);
	const growth = Math.exp((gamma * Math.PI) / omegaD);
	const x = growth * record.target[0] + record.pivot[0];
	const y = growth * record.target[1] + record.pivot[1];
	const number = Math.hypot(x, y);
	const isFree = Math.abs(number - record.arm) <= EQUAL_SHARE * record.arm;
	return {
		number,
		freeAngleDeg: isFree ? (Math.atan2(-y, -x) * 180) / Math.PI : null,
		passTime: Math.PI / omegaD
	};
}

/** A throw that hits the target. */
export interface TetherSolution {
	/** Counter-clockwise positive, m/s. */
	readonly speed: number;
	/** When the ball passes the target, s after release. */
	readonly time: number;
}

/**
 * Speeds that hit the target from one arm angle, without damping: two, of opposite sign.
 *
 * Units:   alpha rad.
 * Method:  cos ω₀t = (T × u)/(r₀ × u), v = ω₀·(r₀ × T)/(sin ω₀t·(r₀ × u)). The post is not looked at.
 * Source:  method sheet A1.
 */
export function solveUndampedSpeeds(
	record: Pick<TetheredBallRecord, 'k' | 'm' | 'target' | 'pivot' | 'arm'>,
	alpha: number
):
	| { ok: true; solutions: [TetherSolution, TetherSolution] }
	| { ok: false; reason: 'through-center' | 'target-too-far' | 'any-speed' | 'no-speed' } {
	const { target, pivot, arm } = record;
	const omega = Math.sqrt(record.k / record.m);
	const [cos, sin] = [Math.cos(alpha), Math.sin(alpha)];
	const place = [pivot[0] + arm * cos, pivot[1] + arm * sin] as const;
	const across = place[0] * cos + place[1] * sin;
	if (Math.abs(across) <= EQUAL_SHARE * arm) return { ok: false, reason: 'through-center' };
	const phaseCos = (target[0] * cos + target[1] * sin) / across;
	if (Math.abs(phaseCos) > 1 + EQUAL_SHARE) return { ok: false, reason: 'target-too-far' };
	const phase = Math.acos(Math.min(1, Math.max(-1, phaseCos)));
	const moment = place[0] * target[1] - place[1] * target[0];
	if (Math.sin(phase) < Math.sqrt(EQUAL_SHARE))
		return { ok: false, reason: Math.abs(moment) <= EQUAL_SHARE ? 'any-speed' : 'no-speed' };
	const speed = (omega * moment) / (Math.sin(phase) * across);
	return {
		ok: true,
		solutions: [
			{ speed, time: phase / omega },
			{ speed: -speed, time: (2 * Math.PI - phase) / omega }
		]
	};
}

/** Targets that some arm angle hits at any speed lie on a circle; and how far the task's own is from it. */
export interface FreeTargets {
	/** m, from the center of the post. */
	readonly center: readonly [number, number];
	readonly radius: number;
	/** The nearest such target, how far it is, and the angle of its line. */
	readonly nearest: readonly [number, number];
	readonly distance: number;
	readonly freeAngleDeg: number;
}

/**
 * The targets with a velocity-free line.
 *
 * Units:   m, degrees.
 * Method:  |e^{γπ/ω_d}·T + P| = arm is a circle around −P·e^{−γπ/ω_d} of radius arm·e^{−γπ/ω_d}.
 * Source:  method sheet A1; agrees with computeTetherAlignment at the target found (free-targets.test.ts).
 */
export function computeFreeTargets(
	record: Parameters<typeof computeTetherAlignment>[0]
): FreeTargets {
	const { omegaD, gamma } = createTetherSwing(record);
	const growth = Math.exp((gamma * Math.PI) / omegaD);
	const center = [-record.pivot[0] / growth, -record.pivot[1] / growth] as const;
	const radius = record.arm / growth;
	const [dx, dy] = [record.target[0] - center[0], record.target[1] - center[1]];
	const away = Math.hypot(dx, dy);
	const [ux, uy] = away > 0 ? [dx / away, dy / away] : [1, 0];
	return {
		center,
		radius,
		nearest: [center[0] + radius * ux, center[1] + radius * uy],
		distance: Math.abs(away - radius),
		freeAngleDeg: (Math.atan2(-uy, -ux) * 180) / Math.PI
	};
}
