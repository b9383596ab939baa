import type { CartMeasure, CartShape } from './cart-record.ts';
import { sampleCart, type CartSample, type CartStart } from './cart-motion.ts';
import { computePhaseInformation } from './phase-information.ts';

/** Sampling interval of forces, and of what is integrated, s. */
const INTERVAL = 0.001;
const INTERVAL_INTEGRATED = 0.004;

/** Measures of one transport over a time. */
export interface CartMeasures {
	/** Mean square force, N². */
	readonly effort: number;
	/** Mean square jerk, m²/s⁶. */
	readonly cartJerk: number;
	readonly bobJerk: number;
}

/**
 * Effort and smoothness of one transport.
 *
 * Units:   seconds s.
 * Method:  integrals by Simpson's rule over samples of 4 ms, divided by the time.
 * Source:  method sheet A8; cases cart-1, -3, -6 (mean_square_force_0_3s), 1e-5 relative.
 */
export function measureCart(shape: CartShape, start: CartStart, seconds: number): CartMeasures {
	const [measures] = measureWindows(shape, start, { seconds, windows: 1 });
	if (!measures) throw new RangeError('measureCart requires a time');
	return measures;
}

/** The same in windows one after another; one transport, of `windows` times `seconds`. */
export function measureWindows(
	shape: CartShape,
	start: CartStart,
	{ seconds, windows }: { seconds: number; windows: number }
): CartMeasures[] {
	const pieces = 2 * Math.max(1, Math.round(seconds / INTERVAL_INTEGRATED / 2));
	const interval = seconds / pieces;
	const sums = Array.from({ length: windows }, () => ({ effort: 0, cartJerk: 0, bobJerk: 0 }));
	let i = 0;
	for (const sample of sampleCart(shape, start, { interval, count: pieces * windows + 1 })) {
		const [k, at] = [Math.floor(i / pieces), i % pieces];
		// The sample between two windows belongs to both.
		if (at === 0 && k > 0) addWeighted(sums[k - 1], sample, 1 / (3 * pieces));
		addWeighted(sums[k], sample, (at === 0 ? 1 : at % 2 === 1 ? 4 : 2) / (3 * pieces));
		i++;
	}
	return sums;
}

function addWeighted(
	sums: { effort: number; cartJerk: number; bobJerk: number } | undefined,
	{ force, cartJerk, bobJerk }: CartSample,
	weight: number
): void {
	if (!sums) return;
	sums.effort += weight * force * force;
	sums.cartJerk += weight * cartJerk * cartJerk;
	sums.bobJerk += weight * bobJerk * bobJerk;
}

/**
 * Predictability of one transport: information, bits, that the cart's phase gives about the force.
 *
 * Method:  samples of 1 ms; 20 equal phase bins × 16 equal force bins over the observed range, plug-in.
 * Source:  method sheet A8; cases cart-1, -3, -6 (mutual_information_bits_10s), .02 bits.
 */
export function measurePredictability(
	shape: CartShape,
	start: CartStart,
	seconds: number,
	bins: { phase: number; force: number } = { phase: 20, force: 16 }
): number {
	const { phases, forces } = readForces(shape, start, seconds);
	return computePhaseInformation(phases, forces, bins);
}

/** Phase of the cart (share of a turn) and force, 1 ms apart. */
export function readForces(shape: CartShape, start: CartStart, seconds: number) {
	const count = Math.max(2, Math.round(seconds / INTERVAL));
	const phases: number[] = [];
	const forces: number[] = [];
	for (const { time, force } of sampleCart(shape, start, { interval: INTERVAL, count })) {
		phases.push((time * shape.frequency) % 1);
		forces.push(force);
	}
	return { phases, forces };
}

/** The one number that a task of this measure is judged by. */
export function computeMeasure(
	measure: CartMeasure,
	shape: CartShape,
	start: CartStart,
	seconds: number
): number {
	if (measure === 'predictability') return measurePredictability(shape, start, seconds);
	const { effort, cartJerk, bobJerk } = measureCart(shape, start, seconds);
	return measure === 'effort' ? effort : cartJerk + bobJerk;
}

/**
 * Angle, rate and force once a turn, where the cart is farthest out: a few points that come again show
 * regular inputs, a scatter irregular ones.
 *
 * @param turns count of samples; the first is a quarter turn after the start
 */
export function strobeCart(shape: CartShape, start: CartStart, turns: number): CartSample[] {
	const steps = Math.ceil(1 / (4 * shape.frequency * INTERVAL));
	const quarter = 1 / (4 * shape.frequency);
	const samples = sampleCart(shape, start, {
		...{ interval: quarter, count: 4 * turns - 2, stepsEach: steps }
	});
	return [...samples].filter((_, i) => i % 4 === 1);
}
