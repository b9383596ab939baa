import { uniformFloat64 } from 'pure-rand/distribution/uniformFloat64';
import { xoroshiro128plus } from 'pure-rand/generator/xoroshiro128plus';
import { computeNormalQuantile } from '$scheduler/statistics/normal.ts';
import type { ScaledTask } from '$scheduler/tasks/scaled-task.ts';

/** An invented person: where they throw and how their throws spread, in scaled units. */
export interface InventedThrower {
	readonly center: readonly [number, number];
	/** Unit vector along the solutions at the center. */
	readonly along: readonly [number, number];
	readonly sdAlong: number;
	readonly sdAcross: number;
}

/**
 * Throws of an invented person, the same for the same seed.
 *
 * Shapes:  count × 2, in scaled units.
 * Method:  two independent normal deviates a throw, along and across the solutions.
 */
export function simulateThrows(
	{ center, along, sdAlong, sdAcross }: InventedThrower,
	{ count, seed }: { count: number; seed: number }
): [number, number][] {
	const stream = xoroshiro128plus(seed);
	const deviate = () => computeNormalQuantile(0.5 + (uniformFloat64(stream) - 0.5) * (1 - 1e-12));
	return Array.from({ length: count }, () => {
		const [a, b] = [sdAlong * deviate(), sdAcross * deviate()];
		return [center[0] + a * along[0] - b * along[1], center[1] + a * along[1] + b * along[0]];
	});
}

/** Share of throws whose result lies within the tolerance. */
export function computeHitShare(task: ScaledTask, throws: readonly (readonly number[])[]): number {
	const hits = throws.filter((z) => Math.abs(task.evaluate(z)) <= task.tolerance).length;
	return hits / throws.length;
}
