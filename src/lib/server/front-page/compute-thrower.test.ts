import { beforeAll, describe, expect, it } from 'vitest';
import { computeThrower, coverLimits, type Thrower } from './compute-thrower';

/** Height error of a drag-free throw from 1.5 m at a target 2 m away and 1 m high, in m. */
function missM(angleDeg: number, speed: number): number {
	const angle = (angleDeg * Math.PI) / 180;
	return 0.5 + 2 * Math.tan(angle) - (9.81 * 4) / (2 * speed ** 2 * Math.cos(angle) ** 2);
}

describe('the picture of the front page', () => {
	let thrower: Thrower;
	beforeAll(() => {
		thrower = computeThrower();
	}, 30_000);

	it('is the same every time', () => {
		expect(computeThrower()).toEqual(thrower);
	}, 30_000);

	it('draws a zero-error line on which the throw meets the target', () => {
		const points = thrower.cloud.zeroSet.flat();
		expect(points.length).toBeGreaterThan(40);
		for (const [angle, speed] of points) expect(Math.abs(missM(angle, speed))).toBeLessThan(1e-6);
	});

	it('counts as hits the throws within 10 cm', () => {
		const hits = thrower.cloud.trials.filter(([a, v]) => Math.abs(missM(a, v)) <= 0.1).length;
		expect(thrower.hitShare).toBeCloseTo(hits / 60, 12);
	});

	it('has a region around about the share of throws it says', () => {
		const region = thrower.cloud.ellipses.find(({ kind }) => kind === 'region');
		const inside = thrower.cloud.trials.filter(([a, v]) => isInside(region, a, v)).length;
		expect(thrower.catchShare).toBe(0.8);
		expect(inside / 60).toBeGreaterThan(0.68);
		expect(inside / 60).toBeLessThan(0.92);
	});

	it('shows a way out that forgives more', () => {
		expect(thrower.thereCmPerDegree).toBeLessThan(thrower.hereCmPerDegree);
		expect(thrower.reachSd).toBeGreaterThan(1);
		expect(thrower.reachSd).toBeLessThan(4);
	});

	it('is a case for a person: more than automatic, less than never', () => {
		expect(thrower.coverShare).toBeGreaterThan(coverLimits.automaticMax);
		expect(thrower.coverShare).toBeLessThan(coverLimits.neverAbove);
	});
});

function isInside(
	region: Thrower['cloud']['ellipses'][number] | undefined,
	angle: number,
	speed: number
): boolean {
	if (!region) return false;
	const [[a, b], [, d]] = region.shape;
	const [u, v] = [angle - region.center[0], speed - region.center[1]];
	return (d * u * u - 2 * b * u * v + a * v * v) / (a * d - b * b) <= 1;
}
