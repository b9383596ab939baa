import type { CloudData, EllipseKind } from './cloud-data';
import {
	labelContours,
	labelZero,
	paintEllipse,
	toPixels,
	type LineLabel,
	type PlotScales
} from './cloud-geometry';
import {
	estimateTextWidth,
	placeLabels,
	type Box,
	type PixelPoint,
	type PlacedLabel
} from './place-labels';

export const labelFontSize = 13;
export const labelRowHeight = 17;

export type LabelKind = EllipseKind | 'place';

export interface CloudLabel extends PlacedLabel {
	readonly kind: LabelKind;
	readonly rows: readonly string[];
}

export interface CloudWords {
	readonly labels: readonly CloudLabel[];
	readonly contours: readonly LineLabel[];
	readonly zero: LineLabel | null;
	readonly arrow: { readonly from: PixelPoint; readonly to: PixelPoint } | null;
	readonly places: readonly { readonly at: PixelPoint; readonly label: string }[];
}

/** Places all words of a cloud picture: first the zero set's, then the ellipses', then the contours'. */
export function labelCloud(data: CloudData, bandStep: number, scales: PlotScales): CloudWords {
	const dots = toPixels(data.trials, scales);
	const named = listNamed(data, scales);
	const outlines = data.ellipses.flatMap((ellipse) => paintEllipse(ellipse, scales).outline);
	const [from, to] = data.arrow ? toPixels([data.arrow.from, data.arrow.to], scales) : [];
	const arrow = from && to ? { from, to } : null;
	const shaft = arrow ? along(arrow.from, arrow.to) : [];
	const zero = labelZero(data, [...dots, ...outlines, ...shaft], scales);
	const zeroPoints = zero ? along([zero.x - 34, zero.y], [zero.x + 34, zero.y]) : [];
	const rings = listPlaces(data, scales).flatMap(({ at }) => ringAround(at, 5));
	const limits = boundNames(data, scales).flatMap(cover);
	const frame = { left: 3, top: 3, width: scales.width - 6, height: scales.height - 6 };
	const placed = placeLabels(named.map(toWish), {
		frame,
		dots: [...dots, ...shaft, ...rings, ...zeroPoints, ...limits]
	});
	const avoid = [...dots, ...outlines, ...zeroPoints, ...placed.flatMap(cover)];
	const { grid } = data;
	return {
		labels: placed.flatMap((label) => {
			const one = named.find(({ key }) => key === label.key);
			return one ? [{ ...label, kind: one.kind, rows: one.rows }] : [];
		}),
		contours:
			grid && bandStep > 0 ? labelContours(data, { grid, step: bandStep, avoid }, scales) : [],
		zero,
		arrow,
		places: listPlaces(data, scales)
	};
}

interface Named {
	readonly key: string;
	readonly kind: LabelKind;
	readonly rows: readonly string[];
	readonly outline: readonly PixelPoint[];
}

function listNamed(data: CloudData, scales: PlotScales): Named[] {
	const ellipses = data.ellipses.flatMap((ellipse, index): Named[] => {
		if (!ellipse.label) return [];
		const rows = [ellipse.label, ...(ellipse.detail ? [ellipse.detail] : [])];
		const { outline } = paintEllipse(ellipse, scales);
		return [{ key: `ellipse-${index}`, kind: ellipse.kind, rows, outline }];
	});
	const places = listPlaces(data, scales).map(({ label, at }, index): Named => ({
		key: `place-${index}`,
		kind: 'place',
		rows: [label],
		outline: ringAround(at, 6)
	}));
	return [...ellipses, ...places];
}

function listPlaces(data: CloudData, scales: PlotScales) {
	return (data.places ?? []).map(({ at, label }) => ({
		label,
		at: [scales.x(at[0]), scales.y(at[1])] as const
	}));
}

function toWish({ key, rows, outline }: Named) {
	return {
		key,
		outline,
		width: Math.max(...rows.map((row) => estimateTextWidth(row, labelFontSize))) + 12,
		height: rows.length * labelRowHeight + 6
	};
}

function ringAround([x, y]: PixelPoint, radius: number): PixelPoint[] {
	return Array.from({ length: 12 }, (_, k) => [
		x + radius * Math.cos((k * Math.PI) / 6),
		y + radius * Math.sin((k * Math.PI) / 6)
	]);
}

function along(from: PixelPoint, to: PixelPoint): PixelPoint[] {
	return Array.from({ length: 24 }, (_, k) => [
		from[0] + ((to[0] - from[0]) * k) / 23,
		from[1] + ((to[1] - from[1]) * k) / 23
	]);
}

/** Points all over a box, so that nothing is written across it. */
function cover(box: Box): PixelPoint[] {
	const shares = [0, 0.25, 0.5, 0.75, 1];
	return shares.flatMap((across) =>
		[0, 0.5, 1].map((down): PixelPoint => [
			box.left + across * box.width,
			box.top + down * box.height
		])
	);
}

/** Where the names of the limits stand: at the right end above or below their line. */
function boundNames(data: CloudData, scales: PlotScales): Box[] {
	return (data.bounds ?? []).flatMap(({ axis, at, label }) => {
		if (axis === 'x') return [];
		const width = estimateTextWidth(label, 12.5);
		const line = scales.y(at);
		const top = line > 18 ? line - 17 : line + 3;
		return [{ left: scales.width - 5 - width, top, width, height: 14 }];
	});
}
