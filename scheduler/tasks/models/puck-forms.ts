import { entry } from '../../linear-algebra/vector.ts';
import { createSingleResult, type ResultModel } from '../result-model.ts';
import type { PuckFrictionRecord, PuckPushRecord } from './puck-records.ts';

/**
 * Push form: the work F·s is used up by friction, so the puck comes F·s/(μ·m·g) far in all.
 *
 * Units:   force N, way m, result m.
 * Source:  method sheet A4; case puck-push. Needs F > μ·m·g, else the puck does not start.
 */
export function createPuckPush({ mu, m, g, D }: PuckPushRecord): ResultModel {
	const friction = mu * m * g;
	return createSingleResult({
		evaluate: (x) =>
			entry(x, 0) > friction ? (entry(x, 0) * entry(x, 1)) / friction - D : Number.NaN,
		gradient: (x) => [entry(x, 1) / friction, entry(x, 0) / friction],
		findInvalid: (x) => (entry(x, 0) > friction ? null : 'push-too-weak')
	});
}

/** Speed at which a pushed puck leaves the hand, m/s; √(2·s·(F/m − μ·g)), null if it does not start. */
export function computePushReleaseSpeed(
	{ mu, m, g }: Pick<PuckPushRecord, 'mu' | 'm' | 'g'>,
	force: number,
	way: number
): number | null {
	const squared = 2 * way * (force / m - mu * g);
	return squared > 0 ? Math.sqrt(squared) : null;
}

/**
 * Form of release speed and friction: result x₀ + v²/(2·μ·g) − D.
 *
 * Source:  method sheet A4.
 */
export function createPuckFriction({ x0, g, D }: PuckFrictionRecord): ResultModel {
	return createSingleResult({
		evaluate: (x) => x0 + entry(x, 0) ** 2 / (2 * entry(x, 1) * g) - D,
		gradient: (x) => {
			const [v, mu] = [entry(x, 0), entry(x, 1)];
			return [v / (mu * g), -(v ** 2) / (2 * mu ** 2 * g)];
		}
	});
}
