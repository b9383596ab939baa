import type { Point } from '$lib/charts/cloud-data';
import { sampleCart } from '$scheduler/tasks/models/cart/cart-motion';
import type { CartPendulumRecord } from '$scheduler/tasks/models/cart/cart-record';
import { createTask } from '$scheduler/tasks/create-task';
import { formatFixed } from '$lib/charts/format-ticks';
import { box, dot, line, text, type Scene, type SceneShape } from './scene';

const INTERVAL_S = 0.02;
const SHOWN_S = 4;

/** Where the pendulum's bob goes while the cart is moved, and the measure on a scale below. */
export function drawCart(record: CartPendulumRecord, x: readonly number[]): Scene {
	const [angle = 0, amplitude = 0] = x;
	const { length, frequency, target, tolerance, seconds } = record;
	const widest = record.variables[1]?.max ?? amplitude;
	const start = { theta: (angle * Math.PI) / 180, omega: 0, amplitude };
	const count = Math.round(Math.min(seconds, SHOWN_S) / INTERVAL_S) + 1;
	const bob = [...sampleCart(record, start, { interval: INTERVAL_S, count, stepsEach: 5 })].map(
		({ theta, time }): Point => [
			amplitude * Math.sin(2 * Math.PI * frequency * time) + length * Math.sin(theta),
			-length * Math.cos(theta)
		]
	);
	const value = createTask(record).evaluate(x) + target;
	const half = 1.25 * (length + widest);
	const scaleEnd = Math.max(2.2 * target, target + 4 * tolerance, 1e-9);
	const place = (measure: number) =>
		-half * 0.9 + (1.8 * half * Math.min(measure, scaleEnd)) / scaleEnd;
	const low = -1.75 * length;
	const cart = 0.16 * length;
	const shapes: SceneShape[] = [
		line(
			[
				[-half, -cart / 2],
				[half, -cart / 2]
			],
			'ground'
		),
		line(
			[
				[-amplitude, cart * 1.4],
				[amplitude, cart * 1.4]
			],
			'guide'
		),
		line(bob, 'way'),
		box([-cart, -cart / 2], [cart, cart / 2], 'ground'),
		line([[0, 0], bob[0] ?? [0, 0]], 'body'),
		dot(bob[0] ?? [0, 0], 'way', 7),
		box(
			[place(target - tolerance), low - 0.07 * length],
			[place(target + tolerance), low + 0.07 * length],
			'target'
		),
		line(
			[
				[-half * 0.9, low],
				[half * 0.9, low]
			],
			'ground'
		),
		line(
			[
				[place(target), low],
				[place(value), low]
			],
			'miss'
		),
		dot([place(value), low], 'way', 6),
		text([place(value), low], `${formatFixed(value, 1)} ${record.resultUnit}`, 'way', {
			...{ anchor: 'middle', offsetPx: [0, 22] as const }
		})
	];
	return {
		bounds: { x: [-half, half], y: [low - 0.35 * length, 0.45 * length] },
		isToScale: true,
		shapes,
		target: {
			at: [place(target), low],
			keys: { x: 'target' },
			readX: (at) => ((at + 0.9 * half) / (1.8 * half)) * scaleEnd,
			detail: `${formatFixed(target, 1)} ${record.resultUnit}`,
			...{ tolerance: null, shape: 'upright', words: 'above' }
		},
		lens: null,
		ruler: { length: 0.2, text: '20 cm' },
		caption: `The way of the bob in the first ${formatFixed(Math.min(seconds, SHOWN_S), 0)} s. Below: ${record.measure} on a scale from 0.`
	};
}
