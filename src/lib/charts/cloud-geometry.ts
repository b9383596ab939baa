import type { ScaleLinear } from 'd3-scale';
import type { CloudData, DrawnEllipse, ErrorGrid, Point } from './cloud-data';
import { ellipseOutline, ellipsePath, toPixelEllipse } from './ellipse-path';
import { computeErrorBands, computeRings, computeUndefinedRings } from './error-bands';
import { formatFixed } from './format-ticks';
import { cutToFrame, placeLineLabel, type LineLabelPlace } from './place-line-label';
import { estimateTextWidth, type PixelPoint } from './place-labels';

export interface PlotScales {
	readonly x: ScaleLinear<number, number>;
	readonly y: ScaleLinear<number, number>;
	readonly width: number;
	readonly height: number;
}

/** Open polyline. */
export function linePath(points: readonly Point[], { x, y }: PlotScales): string {
	return points
		.map(([a, b], index) => `${index === 0 ? 'M' : 'L'}${px(x(a))} ${px(y(b))}`)
		.join('');
}

/** Closed rings as one path. */
export function ringsPath(rings: readonly (readonly Point[])[], scales: PlotScales): string {
	return rings.map((ring) => `${linePath(ring, scales)}Z`).join('');
}

export interface PaintedBand {
	readonly from: number;
	readonly level: number;
	readonly path: string;
}

/** The bands of an error map, to be painted one over the other. */
export function paintBands(grid: ErrorGrid, step: number, scales: PlotScales): PaintedBand[] {
	return computeErrorBands(grid, step).map(({ from, level, rings }) => ({
		from,
		level,
		path: ringsPath(rings, scales)
	}));
}

/** The band of hits: what is at least −tolerance and not above +tolerance (even-odd). */
export function paintTolerance(grid: ErrorGrid, tolerance: number, scales: PlotScales): string {
	const outer = ringsPath(computeRings(grid, -tolerance), scales);
	return outer + ringsPath(computeRings(grid, tolerance), scales);
}

export function paintUndefined(grid: ErrorGrid, scales: PlotScales): string {
	return ringsPath(computeUndefinedRings(grid), scales);
}

export interface PaintedEllipse extends DrawnEllipse {
	readonly path: string;
	readonly outline: PixelPoint[];
}

export function paintEllipse(ellipse: DrawnEllipse, { x, y }: PlotScales): PaintedEllipse {
	const pixel = toPixelEllipse(
		ellipse,
		(value) => x(value),
		(value) => y(value)
	);
	return { ...ellipse, path: ellipsePath(pixel), outline: ellipseOutline(pixel) };
}

export interface LineLabel extends LineLabelPlace {
	readonly text: string;
}

/** Names some contour lines on either side of zero, and the zero set. */
export function labelContours(
	data: CloudData,
	{ grid, step, avoid }: { grid: ErrorGrid; step: number; avoid: readonly PixelPoint[] },
	scales: PlotScales
): LineLabel[] {
	const placed: LineLabel[] = [];
	const named = [2, 5].flatMap((count) => [count * step, -count * step]);
	for (const from of named) {
		const text = describeResult(from, data);
		const lines = computeRings(grid, from).map((ring) => toPixels(ring, scales));
		const place = placeOnLongest(
			lines,
			{ text, avoid: [...avoid, ...placed.map(toPoint)] },
			scales
		);
		if (place) placed.push({ ...place, text });
	}
	return placed;
}

export function labelZero(
	data: CloudData,
	avoid: readonly PixelPoint[],
	scales: PlotScales
): LineLabel | null {
	const text = data.zeroLabel ?? 'zero error';
	if (!text) return null;
	const lines = data.zeroSet.map((line) => toPixels(line, scales));
	const place = placeOnLongest(lines, { text, avoid }, scales);
	return place && { ...place, text };
}

/** "20 cm over", or "+20 cm" where the task has no words for its sides. */
export function describeResult(value: number, { result }: CloudData): string {
	const size = Math.abs(value) * result.factor;
	const digits = size >= 10 || Number.isInteger(+size.toFixed(6)) ? 0 : 1;
	const side = value < 0 ? result.below : result.above;
	const sign = side ? '' : value < 0 ? '−' : '+';
	return `${sign}${formatFixed(size, digits)} ${result.unit}${side ? ` ${side}` : ''}`;
}

function placeOnLongest(
	lines: readonly (readonly PixelPoint[])[],
	{ text, avoid }: { text: string; avoid: readonly PixelPoint[] },
	{ width, height }: PlotScales
): LineLabelPlace | null {
	const pieces = lines
		.flatMap((line) => cutToFrame(line, width, height))
		.sort((a, b) => b.length - a.length);
	const span = estimateTextWidth(text, 12);
	for (const piece of pieces.slice(0, 2)) {
		const place = placeLineLabel(piece, { width, height, span, avoid });
		if (place) return place;
	}
	return null;
}

export function toPixels(line: readonly Point[], { x, y }: PlotScales): PixelPoint[] {
	return line.map(([a, b]) => [x(a), y(b)]);
}

function toPoint({ x, y }: LineLabel): PixelPoint {
	return [x, y];
}

function px(value: number): number {
	return Math.round(value * 10) / 10;
}
