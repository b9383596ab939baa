import type { Point } from '$lib/charts/cloud-data';
import { createSwingTable } from '$scheduler/tasks/models/tether/nearest-pass';
import { computeFreeTargets } from '$scheduler/tasks/models/tether/tether-facts';
import type { TetheredBallRecord } from '$scheduler/tasks/models/tether/tether-record';
import {
	computeSwingWeights,
	createTetherSwing,
	placeAt
} from '$scheduler/tasks/models/tether/tether-swing';
import { followThrow, type TetherPass } from '$scheduler/tasks/models/tether/tethered-ball';
import { formatFixed } from '$lib/charts/format-ticks';
import { dot, line, text, type Scene, type SceneShape } from './scene';

const STEPS = 160;
const RAD_PER_DEG = Math.PI / 180;

export function followTether(record: TetheredBallRecord, x: readonly number[]): TetherPass {
	const table = createSwingTable(createTetherSwing(record));
	return followThrow(record, table, (x[0] ?? 0) * RAD_PER_DEG, x[1] ?? 0);
}

/** The post, the arm, the ball's way up to its closest pass and after it. */
export function drawTether(record: TetheredBallRecord, x: readonly number[]): Scene {
	const swing = createTetherSwing(record);
	const pass = followTether(record, x);
	const end = pass.postTime ?? pass.time;
	const way = trace(pass, swing, 0, end);
	const closest = way.at(-1) ?? [0, 0];
	const { target, pivot, arm, postRadius, ballRadius } = record;
	const free = computeFreeTargets(record);
	const hit = pass.postTime !== null;
	const shapes: SceneShape[] = [
		{ kind: 'circle', at: [...free.center], radius: free.radius, look: 'caution' },
		text([free.center[0] - free.radius, free.center[1]], 'targets with a', 'caution', {
			...{ anchor: 'end', offsetPx: [-6, -2] as const }
		}),
		text([free.center[0] - free.radius, free.center[1]], 'velocity-free line', 'caution', {
			...{ anchor: 'end', offsetPx: [-6, 13] as const }
		}),
		{ kind: 'circle', at: [0, 0], radius: postRadius + ballRadius, look: 'thing' },
		text([-postRadius - ballRadius, 0], 'post', 'ground', { anchor: 'end', offsetPx: [-8, 4] }),
		{ kind: 'circle', at: [pivot[0], pivot[1]], radius: arm, look: 'guide' },
		text([pivot[0] - arm, pivot[1]], 'arm', 'ground', { anchor: 'end', offsetPx: [-8, 4] }),
		line(trace(pass, swing, end, swing.window), 'after'),
		line(way, 'way', true),
		line([[pivot[0], pivot[1]], [...pass.launch.place]], 'body'),
		dot([pivot[0], pivot[1]], 'guide', 4.5),
		dot([...pass.launch.place], 'way', 5),
		text([...pass.launch.place], 'release', 'way', { offsetPx: [11, 5] }),
		...(hit
			? [dot(closest, 'miss', 5), text(closest, 'on the post', 'miss', { offsetPx: [9, 4] })]
			: [])
	];
	return {
		bounds: chooseBounds(record, free),
		isToScale: true,
		shapes,
		target: {
			at: [target[0], target[1]],
			keys: { x: 'targetX', y: 'targetY' },
			detail: `(${formatFixed(target[0], 2)}, ${formatFixed(target[1], 2)}) m`,
			...{ tolerance: record.tolerance, shape: 'point' }
		},
		lens: hit
			? null
			: {
					center: [target[0], target[1]],
					reach: Math.max(3.2 * record.tolerance, 1.35 * pass.distance),
					at: closest,
					tolerance: record.tolerance,
					shapes: [line(way, 'way'), line(trace(pass, swing, end, swing.window), 'after')],
					words: `missed by ${formatFixed(100 * pass.distance, 1)} cm`
				},
		ruler: { length: 0.5, text: '50 cm' },
		caption: hit
			? 'Solid: until the ball meets the post. Dashed: as it would go on.'
			: 'Solid: until the closest pass. Dashed: after it.'
	};
}

function trace(
	{ launch }: TetherPass,
	swing: ReturnType<typeof createTetherSwing>,
	from: number,
	to: number
): Point[] {
	return Array.from({ length: STEPS + 1 }, (_, k) =>
		placeAt(launch, computeSwingWeights(swing, from + ((to - from) * k) / STEPS))
	);
}

function chooseBounds(
	{ pivot, arm, target, postRadius }: TetheredBallRecord,
	free: ReturnType<typeof computeFreeTargets>
) {
	const xs = [
		pivot[0] - arm,
		pivot[0] + arm,
		target[0],
		free.center[0] - free.radius,
		free.center[0] + free.radius,
		-postRadius,
		postRadius
	];
	const ys = [
		pivot[1] - arm,
		target[1],
		free.center[1] + free.radius,
		free.center[1] - free.radius,
		postRadius
	];
	const [left, right] = [Math.min(...xs), Math.max(...xs)];
	const [low, high] = [Math.min(...ys), Math.max(...ys)];
	const margin = 0.06 * (high - low);
	return {
		x: [left - margin, right + 4 * margin] as const,
		y: [low - margin, high + margin] as const
	};
}
