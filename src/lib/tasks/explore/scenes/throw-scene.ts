import type { Point } from '$lib/charts/cloud-data';
import type { ProjectileRecord } from '$scheduler/tasks/task-record';
import type { ThrowAzimuthRecord, ThrowHeightRecord } from '$scheduler/tasks/models/throw-records';
import { formatFixed } from '$lib/charts/format-ticks';
import { box, dot, line, text, type Scene, type SceneLens, type SceneShape } from './scene';

type ThrowRecord = ProjectileRecord | ThrowHeightRecord | ThrowAzimuthRecord;
const STEPS = 80;
const RAD_PER_DEG = Math.PI / 180;

/** The throw from the side; with a direction to the side also where it passes the target's plane. */
export function drawThrow(record: ThrowRecord, x: readonly number[]): Scene {
	const [v = 0, angle = 0, third = 0] = x;
	const h = record.type === 'throw-height' ? third : record.h;
	const phi = record.type === 'throw-azimuth' ? third * RAD_PER_DEG : 0;
	const theta = angle * RAD_PER_DEG;
	const { D, H, g, tolerance } = record;
	const ahead = v * Math.cos(theta) * Math.cos(phi);
	const at = (t: number): Point => [ahead * t, h + v * Math.sin(theta) * t - (g * t * t) / 2];
	const arrival = ahead > 0 ? D / ahead : 0;
	const passed = at(arrival);
	const top = Math.max(H + 1, h + 1, 3.2);
	const bottom = Math.min(0, H - 0.4, h - 0.4);
	const shapes: SceneShape[] = [
		box([-1, bottom - 0.25], [D + 1.6, bottom], 'thing'),
		line(
			[
				[D, bottom],
				[D, top]
			],
			'guide'
		),
		line(
			[
				[0, bottom],
				[0, h]
			],
			'body'
		),
		line(curve(at, arrival, 1.6 * arrival), 'after'),
		line(curve(at, 0, arrival), 'way', true),
		line([[D, H], passed], 'miss'),
		dot([0, h], 'way', 5),
		text([0, h], 'release', 'way', { offsetPx: [9, 19] })
	];
	return {
		bounds: { x: [-1, D + 1.6], y: [bottom - 0.25, top] },
		isToScale: true,
		shapes,
		target: {
			at: [D, H],
			keys: { x: 'D', y: 'H' },
			detail: `${formatFixed(D, 2)} m away, ${formatFixed(H, 2)} m high`,
			...{ tolerance, shape: 'point' }
		},
		lens: record.type === 'throw-azimuth' ? lookFromBehind(record, passed[1], phi) : null,
		ruler: { length: 1, text: '1 m' },
		caption: 'From the side. Solid: up to the target’s plane. Dashed: behind it.'
	};
}

function curve(at: (t: number) => Point, from: number, to: number): Point[] {
	return Array.from({ length: STEPS + 1 }, (_, k) => at(from + ((to - from) * k) / STEPS));
}

/** The target's plane as the person sees it. */
function lookFromBehind(
	{ D, H, side, tolerance }: ThrowAzimuthRecord,
	height: number,
	phi: number
): SceneLens {
	const at: Point = [D * Math.tan(phi), height];
	const miss = Math.hypot(at[0] - side, at[1] - H);
	return {
		center: [side, H],
		reach: Math.max(3.2 * tolerance, 1.35 * Math.min(miss, 4)),
		...{ at, tolerance, shapes: [] },
		words: `seen from behind, missed by ${formatFixed(100 * miss, 0)} cm`
	};
}
