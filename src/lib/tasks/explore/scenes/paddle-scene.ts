import type { Point } from '$lib/charts/cloud-data';
import type { PaddleBounceRecord } from '$scheduler/tasks/models/paddle-record';
import { formatFixed } from '$lib/charts/format-ticks';
import { box, dot, line, text, type Scene, type SceneShape } from './scene';

const STEPS = 60;

/** Height of ball and paddle over time, before the meeting and after it. */
export function drawPaddle(record: PaddleBounceRecord, x: readonly number[]): Scene {
	const { restitution: e, g, targetHeight, tolerance } = record;
	const [falling = 0, paddle = 0] = x;
	const meeting = record.variables.length > 2 ? (x[2] ?? 0) : record.impactHeight;
	const up = (1 + e) * paddle - e * falling;
	const rise = up > 0 ? up / g : 0;
	const before = Math.min(0.6, -falling / g);
	const ball = (t: number): Point => [
		t,
		meeting + (t < 0 ? falling * t : up * t) - (g * t * t) / 2
	];
	const low = meeting - 0.35;
	const high = Math.max(1.7 * (targetHeight - meeting) + meeting, targetHeight + 3 * tolerance);
	const span: readonly [number, number] = [-0.42, 0.8];
	const apex = ball(rise);
	const shapes: SceneShape[] = [
		box([span[0], targetHeight - tolerance], [span[1], targetHeight + tolerance], 'target'),
		line(
			[
				[span[0], targetHeight],
				[span[1], targetHeight]
			],
			'target'
		),
		line(
			[
				[0, low],
				[0, high]
			],
			'guide'
		),
		line(
			[
				[-0.14, meeting - 0.14 * paddle],
				[0.1, meeting + 0.1 * paddle]
			],
			'body'
		),
		text([-0.14, meeting - 0.14 * paddle], 'paddle', 'ground', {
			anchor: 'end',
			offsetPx: [-7, 5]
		}),
		line(curve(ball, -before, 0), 'way'),
		line(curve(ball, 0, rise), 'way', true),
		line(curve(ball, rise, 2 * rise), 'after'),
		...(rise > 0 ? [line([[rise, targetHeight], apex], 'miss'), dot(apex, 'way', 5)] : []),
		text(apex, rise > 0 ? 'apex' : 'the ball does not rise', rise > 0 ? 'way' : 'miss', {
			offsetPx: [10, 21]
		}),
		text([span[1], low], 'time', 'ground', { anchor: 'end', offsetPx: [-4, -6] })
	];
	return {
		bounds: { x: span, y: [low, high] },
		isToScale: false,
		shapes,
		target: {
			at: [span[1] - 0.12, targetHeight],
			keys: { y: 'targetHeight' },
			detail: `${formatFixed(targetHeight, 2)} m`,
			...{ tolerance, shape: 'level', words: 'above' }
		},
		lens: null,
		ruler: null,
		caption:
			'Height over time, 1.2 s from side to side. The ball falls, meets the paddle and rises to its apex.'
	};
}

function curve(at: (t: number) => Point, from: number, to: number): Point[] {
	return Array.from({ length: STEPS + 1 }, (_, k) => at(from + ((to - from) * k) / STEPS));
}
