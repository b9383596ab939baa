import { z } from 'zod';
import { measureWindows, readForces, strobeCart } from '../../tasks/models/cart/cart-measures.ts';
import { cartShape } from '../../tasks/models/cart/cart-record.ts';
import {
	computeInformationFloor,
	computePhaseInformation
} from '../../tasks/models/cart/phase-information.ts';
import { computeLinearSteps } from '../../tasks/linear-steps.ts';
import { computeStudentTQuantile } from '../../statistics/student-t.ts';

const steps = (from: number, to: number) =>
	z
		.strictObject({ from: z.number(), to: z.number(), count: z.int().min(2).max(61) })
		.default({ from, to, count: 9 });
const binsSchema = z.strictObject({
	phase: z.int().min(2).max(200),
	force: z.int().min(2).max(200)
});

export const transportInputSchema = z.strictObject({
	...cartShape,
	thetaDeg: steps(-80, 80).describe('angle of the pendulum at the start, degrees'),
	amplitude: steps(0.02, 0.2).describe('amplitude of the cart, m'),
	turns: z.int().min(1).max(60).default(3).describe('turns of the cart in one window'),
	windows: z
		.int()
		.min(2)
		.max(40)
		.default(5)
		.describe('windows one after another; their means vary'),
	bins: binsSchema.default({ phase: 20, force: 16 }),
	otherBins: binsSchema.default({ phase: 10, force: 8 }),
	orders: z.int().min(1).max(50).default(3).describe('random orders behind the floor'),
	seed: z.int().nonnegative().default(1),
	strobe: z.boolean().default(false).describe('also the force once a turn')
});

const interval = z.strictObject({ mean: z.number(), low: z.number(), high: z.number() });

export const transportSchema = z.strictObject({
	thetaDeg: z.array(z.number()),
	amplitude: z.array(z.number()),
	/** cells[j][i] belongs to amplitude j and angle i. */
	cells: z.array(
		z.array(
			z.strictObject({
				/** Mean square force, N², with the 95 % interval of its windows. */
				effort: interval,
				/** Mean square jerk, m²/s⁶. */
				cartJerk: interval,
				bobJerk: interval,
				/** Bits; the same with other bins, and for the same forces in random order. */
				predictability: z.number(),
				predictabilityOtherBins: z.number(),
				predictabilityFloor: z.number(),
				strobedForces: z.array(z.number()).nullable()
			})
		)
	)
});

type TransportInput = z.output<typeof transportInputSchema>;

/**
 * Effort, smoothness and predictability of the transport over start angle and amplitude.
 *
 * Method:  each measure in windows one after another; interval by Student's t over them.
 * Source:  method sheet A8.
 */
export function mapTransport(input: TransportInput) {
	const thetaDeg = computeLinearSteps(
		[input.thetaDeg.from, input.thetaDeg.to],
		input.thetaDeg.count
	);
	const amplitude = computeLinearSteps(
		[input.amplitude.from, input.amplitude.to],
		input.amplitude.count
	);
	const cells = amplitude.map((size) => thetaDeg.map((angle) => measureCell(input, angle, size)));
	return { thetaDeg, amplitude, cells };
}

function measureCell(input: TransportInput, thetaDeg: number, amplitude: number) {
	const start = { theta: (thetaDeg * Math.PI) / 180, omega: 0, amplitude };
	const { turns, windows, frequency, bins, otherBins, seed, orders } = input;
	const seconds = turns / frequency;
	const measures = measureWindows(input, start, { seconds, windows });
	const { phases, forces } = readForces(input, start, seconds * windows);
	return {
		effort: describe(measures.map(({ effort }) => effort)),
		cartJerk: describe(measures.map(({ cartJerk }) => cartJerk)),
		bobJerk: describe(measures.map(({ bobJerk }) => bobJerk)),
		predictability: computePhaseInformation(phases, forces, bins),
		predictabilityOtherBins: computePhaseInformation(phases, forces, otherBins),
		predictabilityFloor: computeInformationFloor(phases, forces, bins, { seed, orders }),
		strobedForces: input.strobe
			? strobeCart(input, start, turns * windows).map(({ force }) => force)
			: null
	};
}

function describe(values: readonly number[]) {
	const mean = values.reduce((sum, value) => sum + value, 0) / values.length;
	const squares = values.reduce((sum, value) => sum + (value - mean) ** 2, 0);
	const error = Math.sqrt(squares / (values.length - 1) / values.length);
	const half = computeStudentTQuantile(0.975, values.length - 1) * error;
	return { mean, low: mean - half, high: mean + half };
}
