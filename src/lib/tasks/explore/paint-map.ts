import type { ResultMap } from '$scheduler/tasks/result-map';
import { COLOUR_COUNT } from './map-colours';

export interface Painting {
	/** Device pixels. */
	readonly width: number;
	readonly height: number;
	/** As of listMapColours. */
	readonly colours: Uint8ClampedArray;
	/** Miss at which the scale ends, in the unit of the result. */
	readonly top: number;
	readonly tolerance: number;
	/** Cells in which the sign jumps: there sizes are mixed, not signed results. */
	readonly jumps: Uint8Array | null;
}

/**
 * An error map as the bytes of a picture, top row first; transparent where there is no valid outcome.
 *
 * Shapes:  width × height × 4.
 * Method:  each result between the four points around a pixel in proportion, then the size of the miss; so
 *          the band of hits keeps its width however narrow it is against the grid.
 */
export function paintMap(map: ResultMap, painting: Painting): Uint8ClampedArray<ArrayBuffer> {
	const { width, height } = painting;
	const pixels = new Uint8ClampedArray(width * height * 4);
	const columns = placePixels(width, map.nx);
	const rows = placePixels(height, map.ny);
	const miss = map.results.length === 1 ? mixOne(map, painting.jumps) : mixSeveral(map);
	for (let v = 0; v < height; v++) {
		const j = rows.cell[height - 1 - v] ?? 0;
		const fy = rows.share[height - 1 - v] ?? 0;
		for (let u = 0; u < width; u++) {
			const i = columns.cell[u] ?? 0;
			const fx = columns.share[u] ?? 0;
			if (isInvalid(map, i, j, fx, fy)) continue;
			const size = miss(i, j, fx, fy);
			if (size === size) put(pixels, 4 * (v * width + u), size, painting);
		}
	}
	return pixels;
}

function put(
	pixels: Uint8ClampedArray,
	at: number,
	size: number,
	{ colours, top, tolerance }: Painting
): void {
	const share = size >= top ? 1 : size / top;
	const step = Math.round(share * (COLOUR_COUNT - 1)) + (size <= tolerance ? COLOUR_COUNT : 0);
	pixels[at] = colours[3 * step] ?? 0;
	pixels[at + 1] = colours[3 * step + 1] ?? 0;
	pixels[at + 2] = colours[3 * step + 2] ?? 0;
	pixels[at + 3] = 255;
}

/** For each pixel of a side its cell of the grid and its place inside it. */
function placePixels(count: number, points: number): { cell: Int32Array; share: Float64Array } {
	const cell = new Int32Array(count);
	const share = new Float64Array(count);
	for (let k = 0; k < count; k++) {
		const at = ((k + 0.5) / count) * (points - 1);
		const whole = Math.min(points - 2, Math.floor(at));
		cell[k] = whole;
		share[k] = at - whole;
	}
	return { cell, share };
}

type Mix = (i: number, j: number, fx: number, fy: number) => number;

function mixOne({ results, nx }: ResultMap, jumps: Uint8Array | null): Mix {
	const values = results[0] ?? new Float64Array();
	return (i, j, fx, fy) => {
		const at = j * nx + i;
		let a = values[at] ?? 0;
		let b = values[at + 1] ?? 0;
		let c = values[at + nx] ?? 0;
		let d = values[at + nx + 1] ?? 0;
		if (jumps?.[j * (nx - 1) + i]) {
			a = Math.abs(a);
			b = Math.abs(b);
			c = Math.abs(c);
			d = Math.abs(d);
		}
		const low = a + fx * (b - a);
		return Math.abs(low + fy * (c + fx * (d - c) - low));
	};
}

function mixSeveral({ results, nx }: ResultMap): Mix {
	return (i, j, fx, fy) => {
		const at = j * nx + i;
		let sum = 0;
		for (const values of results) {
			const low = mix(values[at] ?? 0, values[at + 1] ?? 0, fx);
			const high = mix(values[at + nx] ?? 0, values[at + nx + 1] ?? 0, fx);
			sum += mix(low, high, fy) ** 2;
		}
		return Math.sqrt(sum);
	};
}

function isInvalid({ invalid, nx }: ResultMap, i: number, j: number, fx: number, fy: number) {
	const at = j * nx + i;
	const low = mix(invalid[at] ?? 0, invalid[at + 1] ?? 0, fx);
	const high = mix(invalid[at + nx] ?? 0, invalid[at + nx + 1] ?? 0, fx);
	return mix(low, high, fy) > 0.5;
}

function mix(a: number, b: number, share: number): number {
	return a + share * (b - a);
}
