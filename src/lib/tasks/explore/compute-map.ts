import { contours } from 'd3-contour';
import { createTask } from '$scheduler/tasks/create-task';
import { cutTask } from '$scheduler/tasks/cut-task';
import {
	beginResultMap,
	computeInvalidShare,
	missAt,
	shiftResultMap,
	type ResultMap
} from '$scheduler/tasks/result-map';
import type { TaskRecord } from '$scheduler/tasks/task-record';
import type { Task } from '$scheduler/tasks/task';
import { traceLevel } from '$scheduler/tasks/trace-level';
import type { Point } from '$lib/charts/cloud-data';
import { niceStep } from '$lib/charts/error-bands';
import { findPlaneSolutions } from './find-plane-solutions';
import { listMapColours } from './map-colours';
import type { Contour, MapPicture, MapRequest } from './map-request';
import { paintMap } from './paint-map';

/** Contour lines up to the end of the scale. */
const CONTOURS = 8;
/**
 * The colour scale ends where most misses lie below it, but not far beyond the middle ones: a corner of huge
 * misses shall not take the colours from the rest.
 */
const TOP_SHARE = 0.96;
const MIDDLE_FACTOR = 2.5;

/** Points of the grid along x and y; slow models have fewer. */
export function chooseGrid(
	record: TaskRecord,
	quality: MapRequest['quality']
): readonly [number, number] {
	const isFine = quality === 'fine';
	if (record.type === 'tethered-ball') return isFine ? [181, 137] : [57, 43];
	if (record.type !== 'cart-pendulum') return isFine ? [201, 151] : [81, 61];
	if (record.measure === 'predictability') return isFine ? [49, 37] : [17, 13];
	return isFine ? [73, 55] : [25, 19];
}

/** The task whose map serves every target that only shifts the result; and the shift. */
function splitTarget(record: TaskRecord): { base: TaskRecord; shift: number } {
	if (record.type !== 'cart-pendulum') return { base: record, shift: 0 };
	return { base: { ...record, target: 0, tolerance: 1 }, shift: record.target };
}

export function cutAt({
	record,
	axes,
	point
}: Pick<MapRequest, 'record' | 'axes' | 'point'>): Task {
	const task = createTask(record);
	return task.variableCount === 2 && axes[0] === 0 && axes[1] === 1
		? task
		: cutTask(task, axes, point);
}

/** The last maps of tasks that are slow, so that moving their target is fast. */
const kept = new Map<string, ResultMap>();
const KEPT_MAX = 4;

/**
 * Computes the results of a map, giving way between rows; null when nobody waits for it any more.
 */
export async function computeResults(
	request: MapRequest,
	isStillWanted: () => Promise<boolean>
): Promise<ResultMap | null> {
	const { base, shift } = splitTarget(request.record);
	const [nx, ny] = chooseGrid(request.record, request.quality);
	const { axes, point, window } = request;
	const others = point.filter((_, i) => !axes.includes(i));
	const key = JSON.stringify([base, axes, others, window, nx, ny]);
	let map = kept.get(key);
	if (!map) {
		const begun = beginResultMap(cutAt({ record: base, axes, point }), window, nx, ny);
		for (let j = 0; j < ny; j++) {
			begun.fillRow(j);
			if (!(await isStillWanted())) return null;
		}
		map = begun.map;
		if (kept.size >= KEPT_MAX) kept.delete(kept.keys().next().value ?? '');
		kept.set(key, map);
	}
	return shift === 0 ? map : shiftResultMap(map, shift);
}

/** Everything that is drawn of a map. */
export function drawMap(map: ResultMap, request: MapRequest, startedMs: number): MapPicture {
	const { record, pixels, theme, quality, window } = request;
	const task = cutAt(request);
	const followed = findFollowed(map);
	const evaluate = isSlow(record)
		? undefined
		: (p: Point) => task.results(p)[followed ?? 0] ?? Number.NaN;
	const hasOne = followed !== null;
	const signed = { ...map, results: map.results.slice(followed ?? 0, (followed ?? 0) + 1) };
	const zero = hasOne ? traceLevel(signed, 0, evaluate) : null;
	const misses = listMisses(map);
	const top = request.top ?? chooseTop(misses, map, record.tolerance);
	// While something moves the edges of the band are interpolated; where the sign jumps there are none.
	const exact = quality === 'fine' ? evaluate : undefined;
	const trace = (level: number) =>
		hasOne ? traceLevel(signed, level, exact, zero?.jumps).lines : [];
	const painting = { ...pixels, colours: listMapColours(theme), top, tolerance: record.tolerance };
	return {
		window,
		image: { ...pixels, pixels: paintMap(map, { ...painting, jumps: zero?.jumps ?? null }) },
		top,
		contours: listContours(map, misses, top),
		zero: zero?.lines ?? [],
		solutions: hasOne ? [] : findPlaneSolutions(task, map),
		edges: hasOne
			? [...trace(record.tolerance), ...trace(-record.tolerance)]
			: ringsAround(map, misses, record.tolerance),
		shifted: request.shift ? trace(request.shift) : [],
		invalid: ringsAround(map, Float64Array.from(map.invalid), 0.5),
		facts: {
			grid: [map.nx, map.ny],
			quality,
			invalidShare: computeInvalidShare(map),
			hitShare: countHits(map, misses, record.tolerance),
			deadBelow: findDeadBelow(map),
			least: misses.reduce(
				(least, miss) => (miss < least ? miss : least),
				Number.POSITIVE_INFINITY
			),
			computeMs: performance.now() - startedMs
		}
	};
}

/**
 * The one result whose sign can be followed: the only one, or the only one that is not 0 all over this map,
 * as when a throw is aimed straight ahead. Null where several have to be 0 at once.
 */
function findFollowed({ results }: ResultMap): number | null {
	const varying = results.flatMap((list, k) =>
		list.some((value) => Math.abs(value) > 1e-12) ? [k] : []
	);
	return varying.length <= 1 ? (varying[0] ?? 0) : null;
}

function isSlow(record: TaskRecord): boolean {
	return record.type === 'cart-pendulum';
}

function listMisses(map: ResultMap): Float64Array {
	return map.results.length === 1
		? (map.results[0]?.map(Math.abs) ?? new Float64Array())
		: Float64Array.from({ length: map.nx * map.ny }, (_, place) => missAt(map, place));
}

/** A round miss that all but a few valid executions stay below. */
function chooseTop(misses: Float64Array, { invalid }: ResultMap, tolerance: number): number {
	const valid = misses.filter((miss, place) => !invalid[place] && Number.isFinite(miss)).sort();
	const at = (share: number) => valid[Math.floor(share * (valid.length - 1))] ?? tolerance;
	const large = Math.min(at(TOP_SHARE), MIDDLE_FACTOR * at(0.5));
	return CONTOURS * niceStep(Math.max(large, 4 * tolerance) / CONTOURS);
}

function listContours(map: ResultMap, misses: Float64Array, top: number): Contour[] {
	return Array.from({ length: CONTOURS - 1 }, (_, k) => {
		const miss = ((k + 1) * top) / CONTOURS;
		return { miss, rings: ringsAround(map, misses, miss) };
	});
}

function ringsAround({ window, nx, ny }: ResultMap, values: Float64Array, from: number): Point[][] {
	const { coordinates } = contours()
		.size([nx, ny])
		.contour([...values], from);
	// The contour library puts value i at i + ½.
	const x = (u: number) => window.x[0] + ((u - 0.5) / (nx - 1)) * (window.x[1] - window.x[0]);
	const y = (v: number) => window.y[0] + ((v - 0.5) / (ny - 1)) * (window.y[1] - window.y[0]);
	return coordinates.flatMap((polygon) =>
		polygon.map((ring) => ring.map(([u = 0, v = 0]): Point => [x(u), y(v)]))
	);
}

function countHits({ invalid }: ResultMap, misses: Float64Array, tolerance: number): number {
	return misses.filter((miss, k) => !invalid[k] && miss <= tolerance).length / misses.length;
}

function findDeadBelow({ window, nx, ny, invalid }: ResultMap): number | null {
	let rows = 0;
	while (rows < ny && invalid.subarray(rows * nx, (rows + 1) * nx).every((flag) => flag === 1))
		rows++;
	if (rows === 0 || rows === ny) return null;
	return window.y[0] + (rows / (ny - 1)) * (window.y[1] - window.y[0]);
}
