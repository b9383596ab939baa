import { describe, expect, it } from 'vitest';
import { measureCart, measureWindows, readForces, strobeCart } from './cart-measures.ts';
import { sampleCart, type CartSample } from './cart-motion.ts';
import { computeInformationFloor, computePhaseInformation } from './phase-information.ts';

const shape = { cartMass: 2, bobMass: 0.5, length: 0.4, damping: 0, frequency: 1, g: 9.81 };
const start = { theta: 0.7, omega: 0, amplitude: 0.1 };

function lastOf(interval: number, seconds: number): CartSample | undefined {
	const count = Math.round(seconds / interval) + 1;
	return [...sampleCart(shape, start, { interval, count })].at(-1);
}

describe('cart with a pendulum', () => {
	it('gains sixteen times with each halving of the step', () => {
		const [coarse, middle, fine] = [0.02, 0.01, 0.005].map((step) => lastOf(step, 2)?.theta ?? NaN);
		const ratio = ((coarse ?? NaN) - (middle ?? NaN)) / ((middle ?? NaN) - (fine ?? NaN));
		expect(ratio).toBeGreaterThan(12);
		expect(ratio).toBeLessThan(20);
	});

	it('keeps the energy of a pendulum whose cart stands still', () => {
		const still = { ...start, amplitude: 0 };
		const energies = [...sampleCart(shape, still, { interval: 0.001, count: 3001 })].map(
			({ theta, omega }) => (0.4 * omega ** 2) / 2 - 9.81 * Math.cos(theta)
		);
		expect(Math.max(...energies) - Math.min(...energies)).toBeLessThan(1e-8);
	});

	it('has the jerk of its own positions', () => {
		const h = 1e-3;
		const samples = [...sampleCart(shape, start, { interval: h, count: 401 })];
		const bob = samples.map(({ theta, time }) => [
			0.1 * Math.sin(2 * Math.PI * time) + 0.4 * Math.sin(theta),
			-0.4 * Math.cos(theta)
		]);
		const third = [0, 1].map((axis) => {
			const at = (k: number) => bob[200 + k]?.[axis] ?? NaN;
			return (at(2) - 2 * at(1) + 2 * at(-1) - at(-2)) / (2 * h ** 3);
		});
		const jerk = samples[200]?.bobJerk ?? NaN;
		expect(Math.hypot(...third) / jerk).toBeCloseTo(1, 3);
	});

	it('has the force that moves cart and bob together', () => {
		const h = 1e-3;
		const samples = [...sampleCart(shape, start, { interval: h, count: 401 })];
		const momentumX = samples.map(({ theta, time }) => {
			const cart = 0.1 * Math.sin(2 * Math.PI * time);
			return 2 * cart + 0.5 * (cart + 0.4 * Math.sin(theta));
		});
		const at = (k: number) => momentumX[200 + k] ?? NaN;
		expect((at(1) - 2 * at(0) + at(-1)) / h ** 2).toBeCloseTo(samples[200]?.force ?? NaN, 3);
	});

	it('measures windows whose mean is that of the whole', () => {
		const windows = measureWindows(shape, start, { seconds: 2, windows: 3 });
		const mean = windows.reduce((sum, { effort }) => sum + effort / 3, 0);
		expect(mean).toBeCloseTo(measureCart(shape, start, 6).effort, 6);
	});

	it('strobes where the cart is farthest out', () => {
		const times = strobeCart(shape, start, 4).map(({ time }) => time);
		[0.25, 1.25, 2.25, 3.25].forEach((time, i) => expect(times[i]).toBeCloseTo(time, 12));
	});
});

describe('information between phase and force', () => {
	const bins = { phase: 4, force: 4 };

	it('is two bits when four phases tell four values', () => {
		const phases = Array.from({ length: 400 }, (_, i) => (i % 4) / 4 + 0.1);
		expect(computePhaseInformation(phases, phases, bins)).toBeCloseTo(2, 12);
	});

	it('is none when the value does not change', () => {
		expect(computePhaseInformation([0.1, 0.6], [3, 3], bins)).toBe(0);
	});

	it('has a floor of chance far below what a regular force tells', () => {
		const { phases, forces } = readForces(shape, { ...start, theta: 0 }, 4);
		const floor = computeInformationFloor(phases, forces, bins, { seed: 3, orders: 4 });
		expect(floor).toBeGreaterThan(0);
		// Expected under independence: (4 − 1)² / (2·n·ln 2) bits.
		expect(floor).toBeLessThan((3 * 9) / (2 * phases.length * Math.LN2));
		expect(computePhaseInformation(phases, forces, bins)).toBeGreaterThan(50 * floor);
	});

	it('refuses lists that do not belong together', () => {
		expect(() => computePhaseInformation([0.1], [1, 2], bins)).toThrow(RangeError);
	});
});
