import { computePushReleaseSpeed } from '$scheduler/tasks/models/puck-forms';
import type { PuckFrictionRecord, PuckPushRecord } from '$scheduler/tasks/models/puck-records';
import type { PuckRecord } from '$scheduler/tasks/task-record';
import { formatFixed } from '$lib/charts/format-ticks';
import { box, dot, line, text, type Scene, type SceneShape } from './scene';

/** The track from above: where the puck is let go and where it stops. */
export function drawPuck(
	record: PuckRecord | PuckPushRecord | PuckFrictionRecord,
	x: readonly number[]
): Scene {
	const slide = readSlide(record, x);
	const { D, tolerance } = record;
	const from = Math.min(0, slide.lowest) - 0.12 * D;
	const to = Math.max(1.6 * D, D + 4 * tolerance);
	const stop = Math.min(slide.stop, to);
	const half = 0.14 * (to - from);
	const shapes: SceneShape[] = [
		box([from, -half], [to, half], 'ground'),
		box([D - tolerance, -half], [D + tolerance, half], 'target'),
		line(
			[
				[D, -half],
				[D, half]
			],
			'target'
		),
		line(
			[
				[0, -half],
				[0, half]
			],
			'guide'
		),
		text([0, -half], '0', 'ground', { anchor: 'middle', offsetPx: [0, 15] }),
		...(slide.pushedFrom === null
			? []
			: [
					line(
						[
							[slide.pushedFrom, 0],
							[slide.release, 0]
						],
						'body'
					)
				]),
		...(slide.isMoving
			? [
					line(
						[
							[slide.release, 0],
							[stop, 0]
						],
						'way',
						true
					),
					line(
						[
							[D, 0.55 * half],
							[stop, 0.55 * half]
						],
						'miss'
					)
				]
			: []),
		dot([slide.release, 0], 'way', 5),
		text([slide.release, 0], slide.releaseWords, 'way', { anchor: 'middle', offsetPx: [0, -11] }),
		...(slide.isMoving ? [dot([stop, 0], 'way', 8)] : []),
		...(slide.stop > to
			? [text([to, 0], 'slides on', 'miss', { anchor: 'end', offsetPx: [-8, -12] })]
			: [])
	];
	return {
		bounds: { x: [from, to], y: [-1.5 * half, 1.5 * half] },
		isToScale: true,
		shapes,
		target: {
			at: [D, half],
			keys: { x: 'D' },
			detail: `at ${formatFixed(D, 2)} m`,
			...{ tolerance, shape: 'upright' }
		},
		lens: null,
		ruler: { length: to - from > 4 ? 1 : 0.5, text: to - from > 4 ? '1 m' : '50 cm' },
		caption: slide.caption
	};
}

function readSlide(
	record: PuckRecord | PuckPushRecord | PuckFrictionRecord,
	[a = 0, b = 0]: readonly number[]
) {
	if (record.type === 'puck') {
		const lowest = record.variables[1]?.min ?? 0;
		const stop = b + a ** 2 / (2 * record.mu * record.g);
		return { release: b, stop, pushedFrom: null, isMoving: true, lowest, ...words('let go') };
	}
	if (record.type === 'puck-friction') {
		const stop = record.x0 + a ** 2 / (2 * b * record.g);
		const release = record.x0;
		return { release, stop, pushedFrom: null, isMoving: true, lowest: release, ...words('let go') };
	}
	const isMoving = computePushReleaseSpeed(record, a, b) !== null;
	const stop = isMoving ? (a * b) / (record.mu * record.m * record.g) : b;
	return {
		...{ release: b, stop, pushedFrom: 0, isMoving, lowest: 0, releaseWords: 'push ends' },
		caption: isMoving
			? 'The track from above. Thick: the push. Then the puck slides until friction stops it.'
			: 'The push is too weak: friction holds the puck.'
	};
}

function words(releaseWords: string) {
	return {
		releaseWords,
		caption: 'The track from above: the puck slides until friction stops it.'
	};
}
