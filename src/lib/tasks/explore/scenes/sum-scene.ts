import type { Point } from '$lib/charts/cloud-data';
import type { FormulaRecord, LinearRecord } from '$scheduler/tasks/task-record';
import type { TwoFingerRecord } from '$scheduler/tasks/models/two-finger';
import { createTask } from '$scheduler/tasks/create-task';
import { formatFixed } from '$lib/charts/format-ticks';
import { box, dot, line, text, type Scene, type SceneShape } from './scene';

/** Parts laid end to end, and where their sum comes to lie against what is asked for. */
export function drawSum(record: LinearRecord | TwoFingerRecord, x: readonly number[]): Scene {
	const weights = record.type === 'linear' ? record.coef : record.variables.map(() => 1);
	const { target, tolerance, resultUnit, variables } = record;
	const parts = weights.map((weight, i) => weight * (x[i] ?? 0));
	const reaches = variables.map(({ min, max }, i) => {
		const weight = weights[i] ?? 0;
		return {
			low: Math.min(0, weight * min, weight * max),
			high: Math.max(0, weight * min, weight * max)
		};
	});
	const low = Math.min(0, target, reaches.reduce((sum, reach) => sum + reach.low, 0) / 1.5);
	const high = Math.max(target * 1.4, reaches.reduce((sum, reach) => sum + reach.high, 0) / 1.5);
	const margin = 0.08 * (high - low);
	const rows = parts.length;
	let end = 0;
	const shapes: SceneShape[] = [
		box([target - tolerance, -0.4], [target + tolerance, rows + 0.6], 'target'),
		line(
			[
				[0, -0.4],
				[0, rows + 0.6]
			],
			'guide'
		),
		text([0, rows + 0.6], '0', 'ground', { anchor: 'middle', offsetPx: [0, -6] }),
		...parts.flatMap((part, i): SceneShape[] => {
			const [from, y] = [end, rows - 1 - i];
			end += part;
			return [
				line(
					[
						[from, y + 0.5],
						[end, y + 0.5]
					],
					'way',
					true
				),
				line(
					[
						[end, y + 0.5],
						[end, y - (i === rows - 1 ? 0.4 : 0.5)]
					],
					'guide'
				),
				text([Math.min(from, end), y + 0.5], variables[i]?.name ?? '', 'ground', {
					offsetPx: [4, -9]
				})
			];
		}),
		line(
			[
				[target, -0.1],
				[end, -0.1]
			],
			'miss'
		),
		dot([end, -0.1], 'way', 5)
	];
	return {
		bounds: { x: [low - margin, high + margin], y: [-0.6, rows + 1.2] },
		isToScale: false,
		shapes,
		target: {
			at: [target, rows + 0.3],
			keys: { x: 'target' },
			detail: `${formatFixed(target, 1)} ${resultUnit}`.trim(),
			...{ tolerance, shape: 'upright' }
		},
		lens: null,
		ruler: null,
		caption: 'Each part starts where the one above it ends; the last end is the sum.'
	};
}

/** A formula has no room of its own: the result, and what one scale of each variable does to it. */
export function drawFormula(record: FormulaRecord, x: readonly number[]): Scene {
	const task = createTask(record);
	const result = task.evaluate(x);
	const slopes = task.gradient(x).map((slope, i) => slope * (record.variables[i]?.scale ?? 0));
	const reach = Math.max(record.tolerance * 4, ...slopes.map((slope) => Math.abs(slope) * 1.6));
	const rows = slopes.length;
	const at = (value: number) => Math.min(reach, Math.max(-reach, value));
	const bar = (value: number, y: number): SceneShape =>
		line(
			[
				[0, y],
				[at(value), y]
			] satisfies Point[],
			'way',
			true
		);
	const { tolerance } = record;
	return {
		bounds: { x: [-1.25 * reach, 1.25 * reach], y: [-0.7, rows + 1] },
		isToScale: false,
		shapes: [
			box([-tolerance, -0.5], [tolerance, 0.3], 'target'),
			line(
				[
					[0, -0.5],
					[0, rows + 0.6]
				],
				'guide'
			),
			...slopes.flatMap((slope, i): SceneShape[] => [
				...(Number.isFinite(slope) ? [bar(slope, rows - i)] : []),
				text([-1.25 * reach, rows - i], `${record.variables[i]?.name ?? ''} +1 scale`, 'ground', {
					offsetPx: [2, -6]
				})
			]),
			...(Number.isFinite(result)
				? [
						line(
							[
								[0, -0.1],
								[at(result), -0.1]
							],
							'miss'
						),
						dot([at(result), -0.1], 'way', 6)
					]
				: []),
			text([-1.25 * reach, -0.1], Number.isFinite(result) ? 'result' : 'no result here', 'miss', {
				offsetPx: [2, -6]
			})
		],
		target: null,
		lens: null,
		ruler: null,
		caption:
			'Below: the result at the probe, with the band of hits. Above: what one scale more of each variable changes.'
	};
}
