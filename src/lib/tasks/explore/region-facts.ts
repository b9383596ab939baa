import { computeCholesky, solveLower } from '$scheduler/linear-algebra/cholesky';
import { dot, entry, subtract, type Matrix, type Vector } from '$scheduler/linear-algebra/vector';
import { isHit, type Task } from '$scheduler/tasks/task';
import { computeMassInside } from '$scheduler/variability/mass-inside';
import { computeCovariance, computeMeanVector } from '$scheduler/variability/moments';

/** A penalized region: {x: (x − center)ᵀ·shape⁻¹·(x − center) ≤ 1}, in task units. */
export interface Region {
	readonly center: Vector;
	readonly shape: Matrix;
}

/** The numbers beside a penalized region. */
export interface RegionFacts {
	/** Share of a normal cloud with the trials' mean and covariance; null where that has no width. */
	readonly cloudShare: number | null;
	readonly trialsInside: number;
	readonly trials: number;
	/** Of the plane shown, in the product of the units of its two variables. */
	readonly area: number;
	/** Part of it whose executions hit. */
	readonly hitArea: number;
}

const RINGS = 60;
const RAYS = 240;

/**
 * What a penalized region takes away: of the cloud, of the plane, of the executions that hit.
 *
 * Shapes:  trials (n × d); region of the same d for the cloud, of the two shown variables for the plane.
 * Method:  cloud by computeMassInside; hit area by midpoints of 60 rings × 240 rays of the ellipse.
 * Source:  method sheet B7; region-facts.test.ts (numeric integrals). Accuracy: 1 %.
 */
export function computeRegionFacts(options: {
	plane: Task;
	planeRegion: Region;
	region: Region;
	trials: Matrix;
}): RegionFacts {
	const { region, planeRegion, trials, plane } = options;
	const mass = computeMassInside({
		...{ mean: computeMeanVector(trials), covariance: computeCovariance(trials) },
		...{ center: region.center, shape: region.shape }
	});
	return {
		cloudShare: mass.ok ? mass.probability : null,
		trialsInside: trials.filter((x) => isInside(region, x)).length,
		trials: trials.length,
		...measureAreas(plane, planeRegion)
	};
}

/** Whether an execution lies in a region; false for a region without width. */
export function isInside({ center, shape }: Region, x: Vector): boolean {
	const factor = computeCholesky(shape);
	if (!factor.ok) return false;
	const z = solveLower(factor.lower, subtract(x, center));
	return dot(z, z) <= 1;
}

function measureAreas(plane: Task, { center, shape }: Region): { area: number; hitArea: number } {
	const factor = computeCholesky(shape);
	if (!factor.ok) return { area: 0, hitArea: 0 };
	const [[a = 0] = [], [b = 0, c = 0] = []] = factor.lower;
	const area = Math.PI * a * c;
	let hits = 0;
	for (let ring = 0; ring < RINGS; ring++) {
		const radius = Math.sqrt((ring + 0.5) / RINGS);
		for (let ray = 0; ray < RAYS; ray++) {
			const angle = (2 * Math.PI * (ray + 0.5)) / RAYS;
			const [u, v] = [radius * Math.cos(angle), radius * Math.sin(angle)];
			const x = [entry(center, 0) + a * u, entry(center, 1) + b * u + c * v];
			if (plane.findInvalid(x) === null && isHit(plane, plane.evaluate(x))) hits++;
		}
	}
	return { area, hitArea: (area * hits) / (RINGS * RAYS) };
}
