import { scaleLinear, type ScaleLinear } from 'd3-scale';
import type { Axis, Point } from '$lib/charts/cloud-data';
import { toPixels, type PlotScales } from '$lib/charts/cloud-geometry';
import { cutToFrame, placeLineLabel, type LineLabelPlace } from '$lib/charts/place-line-label';
import { estimateTextWidth, type PixelPoint } from '$lib/charts/place-labels';
import { formatFixed } from '$lib/charts/format-ticks';
import type { TaskRecord, TaskVariable } from '$scheduler/tasks/task-record';
import type { MapPicture } from './map-request';
import { chooseResultWords, digitsFor } from './result-words';

export interface MapLabel extends LineLabelPlace {
	readonly text: string;
}

/** Names contour lines and the lines of perfect trials where they hide least. */
export function labelMap(
	{ contours, zero }: MapPicture,
	{
		record,
		scales,
		avoid
	}: { record: TaskRecord; scales: PlotScales; avoid: readonly PixelPoint[] }
): { contours: MapLabel[]; zero: MapLabel[] } {
	const { factor } = chooseResultWords(record);
	const taken: PixelPoint[] = [...avoid];
	const place = (lines: readonly (readonly Point[])[], words: string, most: number): MapLabel[] => {
		const pieces = lines
			.flatMap((each) => cutToFrame(toPixels(each, scales), scales.width, scales.height))
			.sort((a, b) => b.length - a.length);
		const found: MapLabel[] = [];
		for (const piece of pieces.slice(0, 6)) {
			if (found.length === most) break;
			const span = estimateTextWidth(words, 12);
			const spot = placeLineLabel(piece, { ...scales, span, avoid: taken });
			if (!spot) continue;
			found.push({ ...spot, text: words });
			taken.push([spot.x, spot.y]);
		}
		return found;
	};
	const step = (contours[0]?.miss ?? 1) * factor;
	const zeroLabels = place(zero, 'zero error', 2);
	const named = contours.filter((_, k) => k % 2 === 1);
	return {
		zero: zeroLabels,
		contours: named.flatMap(({ miss, rings }) =>
			place(rings, formatFixed(miss * factor, digitsFor(step)), 2)
		)
	};
}

/** A variable as an axis of a picture. */
export function axisOf({ name, unit, min, max }: TaskVariable): Axis {
	const isAngle = unit === 'deg';
	return {
		...{ label: name, unit: isAngle ? 'degrees' : unit, domain: [min, max] },
		tickSuffix: isAngle ? '°' : undefined
	};
}

/** Scales of a plot of this size over a window. */
export function scalesOf(
	window: { readonly x: readonly [number, number]; readonly y: readonly [number, number] },
	width: number,
	height: number
): PlotScales & { x: ScaleLinear<number, number>; y: ScaleLinear<number, number> } {
	return {
		x: scaleLinear([...window.x], [0, width]),
		y: scaleLinear([...window.y], [height, 0]),
		...{ width, height }
	};
}
