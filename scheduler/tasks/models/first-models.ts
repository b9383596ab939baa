import { dot, entry, type Vector } from '../../linear-algebra/vector.ts';
import { createSingleResult, type ResultModel } from '../result-model.ts';
import type { LinearRecord, ProjectileRecord, PuckRecord } from '../task-record.ts';

/** f = x₀ + k·v² − D with k = 1/(2μg). */
export function createPuck({ mu, g, D }: PuckRecord): ResultModel {
	const k = 1 / (2 * mu * g);
	return createSingleResult({
		evaluate: (x) => entry(x, 1) + k * entry(x, 0) ** 2 - D,
		gradient: (x) => [2 * k * entry(x, 0), 1]
	});
}

/** f = h + D·tan θ − g·D²/(2·v²·cos²θ) − H, θ in degrees. */
export function createProjectile({ h, D, H, g }: ProjectileRecord): ResultModel {
	const radPerDeg = Math.PI / 180;
	return createSingleResult({
		evaluate: (x) => {
			const [v, theta] = [entry(x, 0), entry(x, 1) * radPerDeg];
			return h + D * Math.tan(theta) - (g * D ** 2) / (2 * v ** 2 * Math.cos(theta) ** 2) - H;
		},
		gradient: (x) => {
			const [v, theta] = [entry(x, 0), entry(x, 1) * radPerDeg];
			const cosSquared = Math.cos(theta) ** 2;
			const bySpeed = (g * D ** 2) / (v ** 3 * cosSquared);
			const byAngle = D / cosSquared - (g * D ** 2 * Math.tan(theta)) / (v ** 2 * cosSquared);
			return [bySpeed, radPerDeg * byAngle];
		}
	});
}

export function createLinear({ coef, target }: LinearRecord): ResultModel {
	return createSingleResult({
		evaluate: (x: Vector) => dot(coef, x) - target,
		gradient: () => [...coef]
	});
}
