import type { TetheredBallRecord } from './tether-record.ts';

export type Place = readonly [number, number];

/** How the ball swings, whatever the throw. */
export interface TetherSwing {
	/** Without damping and with it, rad/s; and the rate γ at which the swing dies down, 1/s. */
	readonly omega0: number;
	readonly omegaD: number;
	readonly gamma: number;
	/** Time from release that is looked at, s. */
	readonly window: number;
}

/** A throw: place and velocity at release. */
export interface Launch {
	readonly place: Place;
	readonly velocity: Place;
}

/** Weights of the place and the velocity at release in the place and the velocity at a time. */
export interface SwingWeights {
	readonly c: number;
	readonly s: number;
	readonly dc: number;
	readonly ds: number;
}

export function createTetherSwing({
	k,
	m,
	relaxationTime,
	window
}: Pick<TetheredBallRecord, 'k' | 'm' | 'relaxationTime' | 'window'>): TetherSwing {
	const omega0 = Math.sqrt(k / m);
	const gamma = relaxationTime === null ? 0 : 1 / relaxationTime;
	const omegaD = Math.sqrt(omega0 ** 2 - gamma ** 2);
	return { omega0, omegaD, gamma, window: window ?? (2 * Math.PI) / omega0 };
}

/**
 * Exact solution of the damped swing: r(t) = c·r₀ + s·v₀, ṙ(t) = dc·r₀ + ds·v₀.
 *
 * Units:   t s; c and ds 1, s in s, dc 1/s.
 * Source:  method sheet A1; cases tether-damped-1 and others (independent integration), 1e-6.
 */
export function computeSwingWeights(
	{ omega0, omegaD, gamma }: TetherSwing,
	t: number
): SwingWeights {
	const decay = Math.exp(-gamma * t);
	const [cos, sin] = [Math.cos(omegaD * t), Math.sin(omegaD * t)];
	const damping = gamma / omegaD;
	return {
		c: decay * (cos + damping * sin),
		s: (decay * sin) / omegaD,
		dc: (-decay * omega0 ** 2 * sin) / omegaD,
		ds: decay * (cos - damping * sin)
	};
}

export function placeAt({ place, velocity }: Launch, { c, s }: SwingWeights): [number, number] {
	return [c * place[0] + s * velocity[0], c * place[1] + s * velocity[1]];
}

export function velocityAt(
	{ place, velocity }: Launch,
	{ dc, ds }: SwingWeights
): [number, number] {
	return [dc * place[0] + ds * velocity[0], dc * place[1] + ds * velocity[1]];
}

/** Place on the arm's circle and velocity along it; the arm's angle in rad, speed in m/s. */
export function createLaunch(
	{ arm, pivot }: Pick<TetheredBallRecord, 'arm' | 'pivot'>,
	alpha: number,
	speed: number
): Launch {
	const [cos, sin] = [Math.cos(alpha), Math.sin(alpha)];
	return {
		place: [pivot[0] + arm * cos, pivot[1] + arm * sin],
		velocity: [-speed * sin, speed * cos]
	};
}
