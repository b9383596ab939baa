import { entry, type Vector } from '../../linear-algebra/vector.ts';
import { createSeveralResults, createSingleResult, type ResultModel } from '../result-model.ts';
import type { InvalidReason } from '../task.ts';
import type { ThrowAzimuthRecord, ThrowHeightRecord } from './throw-records.ts';

const RAD_PER_DEG = Math.PI / 180;

/**
 * Speed, angle and height of release; result h + D·tan θ − g·D²/(2v²cos²θ) − H.
 *
 * Units:   m/s, degrees, m; result m.
 * Source:  method sheet A3; the manifold is a surface.
 */
export function createThrowHeight({ D, H, g }: ThrowHeightRecord): ResultModel {
	return createSingleResult({
		evaluate: (x) => {
			const [v, theta] = [entry(x, 0), entry(x, 1) * RAD_PER_DEG];
			const drop = (g * D ** 2) / (2 * v ** 2 * Math.cos(theta) ** 2);
			return findUnthrown(v, theta) ? Number.NaN : entry(x, 2) + D * Math.tan(theta) - drop - H;
		},
		gradient: (x) => {
			const [v, theta] = [entry(x, 0), entry(x, 1) * RAD_PER_DEG];
			const cosSquared = Math.cos(theta) ** 2;
			const byAngle = D / cosSquared - (g * D ** 2 * Math.tan(theta)) / (v ** 2 * cosSquared);
			return [(g * D ** 2) / (v ** 3 * cosSquared), RAD_PER_DEG * byAngle, 1];
		},
		findInvalid: (x) => findUnthrown(entry(x, 0), entry(x, 1) * RAD_PER_DEG)
	});
}

/**
 * Speed, elevation and azimuth; results: miss to the side D·tan φ − side, and miss in height after the
 * flight time D/(v·cos θ·cos φ).
 *
 * Units:   m/s, degrees; results m.
 * Source:  method sheet A3; case projectile-3d, 1e-9. The manifold is a curve.
 */
export function createThrowAzimuth({ h, D, H, g, side }: ThrowAzimuthRecord): ResultModel {
	return createSeveralResults({
		resultCount: 2,
		results: (x) => {
			const { v, theta, phi } = readThrow(x);
			if (findUnthrown(v, theta) || Math.abs(phi) >= Math.PI / 2) return [Number.NaN, Number.NaN];
			const way = D / Math.cos(phi);
			const drop = (g * way ** 2) / (2 * v ** 2 * Math.cos(theta) ** 2);
			return [D * Math.tan(phi) - side, h + way * Math.tan(theta) - drop - H];
		},
		jacobian: (x) => {
			const { v, theta, phi } = readThrow(x);
			const way = D / Math.cos(phi);
			const cosSquared = Math.cos(theta) ** 2;
			const bySpeed = (g * way ** 2) / (v ** 3 * cosSquared);
			const byAngle = way / cosSquared - (g * way ** 2 * Math.tan(theta)) / (v ** 2 * cosSquared);
			const byWay = Math.tan(theta) - (g * way) / (v ** 2 * cosSquared);
			const wayByAzimuth = way * Math.tan(phi);
			return [
				[0, 0, (RAD_PER_DEG * D) / Math.cos(phi) ** 2],
				[bySpeed, RAD_PER_DEG * byAngle, RAD_PER_DEG * byWay * wayByAzimuth]
			];
		},
		findInvalid: (x) => {
			const { v, theta, phi } = readThrow(x);
			return Math.abs(phi) < Math.PI / 2 ? findUnthrown(v, theta) : 'plane-not-reached';
		}
	});
}

function readThrow(x: Vector) {
	const [theta, phi] = [entry(x, 1) * RAD_PER_DEG, entry(x, 2) * RAD_PER_DEG];
	return { v: entry(x, 0), theta, phi };
}

/** A throw that does not go towards the plane. */
function findUnthrown(v: number, theta: number): InvalidReason | null {
	return v > 0 && Math.abs(theta) < Math.PI / 2 ? null : 'plane-not-reached';
}
