import type { Point } from '$lib/charts/cloud-data';
import type { ArmEndpointRecord, ArmXRecord } from '$scheduler/tasks/models/arm-record';
import { formatFixed } from '$lib/charts/format-ticks';
import { box, dot, line, text, type Scene, type SceneLens, type SceneShape } from './scene';

const RAD_PER_DEG = Math.PI / 180;

/** The arm in its plane, from the shoulder to the fingertip. */
export function drawArm(record: ArmEndpointRecord | ArmXRecord, x: readonly number[]): Scene {
	const joints = listJoints(record.lengths, x);
	const tip = joints.at(-1) ?? [0, 0];
	const most = record.lengths.reduce((sum, length) => sum + length, 0);
	const { tolerance } = record;
	const low = -0.45 * most;
	const target = record.type === 'arm-endpoint' ? record.target : null;
	const line0 = record.type === 'arm-x' ? record.targetX : 0;
	const high = Math.max(1.08 * most, (target?.[1] ?? 0) + 0.1);
	const shapes: SceneShape[] = [
		{ kind: 'circle', at: [0, 0], radius: most, look: 'guide' },
		...(target
			? []
			: [
					box([line0 - tolerance, low], [line0 + tolerance, high], 'target'),
					line(
						[
							[line0, low],
							[line0, high]
						],
						'target'
					)
				]),
		line(joints, 'body'),
		...joints.slice(0, -1).map((joint) => dot(joint, 'guide', 5)),
		dot(tip, 'way', 5.5),
		line([target ? [target[0], target[1]] : [line0, tip[1]], tip], 'miss'),
		text([0, 0], 'shoulder', 'ground', { anchor: 'middle', offsetPx: [0, 20] }),
		text(tip, 'fingertip', 'way', { offsetPx: [9, -8] })
	];
	return {
		bounds: { x: [-0.85 * most, 1.15 * most], y: [low, high] },
		isToScale: true,
		shapes,
		target: target
			? {
					at: [target[0], target[1]],
					keys: { x: 'targetX', y: 'targetY' },
					detail: `(${formatFixed(target[0], 2)}, ${formatFixed(target[1], 2)}) m`,
					...{ tolerance, shape: 'point' }
				}
			: {
					...{ at: [line0, high - 0.06 * (high - low)], keys: { x: 'targetX' } },
					detail: `x = ${formatFixed(line0, 2)} m`,
					...{ tolerance, shape: 'upright' }
				},
		lens: target ? lookAtTip([target[0], target[1]], tip, tolerance) : null,
		ruler: { length: 0.2, text: '20 cm' },
		caption: 'The arm in its plane. Dotted: as far as it reaches.'
	};
}

function listJoints(lengths: readonly number[], angles: readonly number[]): Point[] {
	let [heading, x, y] = [0, 0, 0];
	const joints: Point[] = [[0, 0]];
	lengths.forEach((length, i) => {
		heading += (angles[i] ?? 0) * RAD_PER_DEG;
		x += length * Math.cos(heading);
		y += length * Math.sin(heading);
		joints.push([x, y]);
	});
	return joints;
}

function lookAtTip(center: Point, at: Point, tolerance: number): SceneLens {
	const miss = Math.hypot(at[0] - center[0], at[1] - center[1]);
	return {
		...{ center, at, tolerance, shapes: [] },
		reach: Math.max(3.2 * tolerance, 1.35 * miss),
		words: `missed by ${formatFixed(100 * miss, 1)} cm`
	};
}
