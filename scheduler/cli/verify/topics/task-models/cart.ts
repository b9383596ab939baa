import { z } from 'zod';
import { measureCart, readForces } from '../../../../tasks/models/cart/cart-measures.ts';
import { sampleCart, type CartStart } from '../../../../tasks/models/cart/cart-motion.ts';
import type { CartShape } from '../../../../tasks/models/cart/cart-record.ts';
import { computePhaseInformation } from '../../../../tasks/models/cart/phase-information.ts';
import { forInputs, Judged } from '../../topic.ts';

const INTERVAL = 0.001;
/** Whole seconds for which cases may ask. */
const SECONDS = [1, 2, 3, 4, 5, 10];
/** The sheet's own limit: samples on the edge of a bin may fall to either side. */
const INFORMATION_TOLERANCE = { abs: 0.02 };

/** As the sheet counts: equal bins from the least to the largest phase that occurs. */
function computeInformation(shape: CartShape, start: CartStart, seconds: number): number {
	const { phases, forces } = readForces(shape, start, seconds);
	const [low, high] = [Math.min(...phases), Math.max(...phases)];
	const spread = phases.map((phase) => (phase - low) / (high - low));
	return computePhaseInformation(spread, forces, { phase: 20, force: 16 });
}

/** Cases of the cart with a pendulum. */
export const CART_TOPIC = forInputs(
	z.strictObject({
		M: z.number().positive(),
		m: z.number().positive(),
		l: z.number().positive(),
		b: z.number().nonnegative().default(0),
		A: z.number(),
		f: z.number().positive(),
		theta0_rad: z.number(),
		omega0_rad_s: z.number().default(0),
		g: z.number().positive().default(9.81)
	}),
	({ M, m, l, b, A, f, theta0_rad, omega0_rad_s, g }) => {
		const shape = { cartMass: M, bobMass: m, length: l, damping: b, frequency: f, g };
		const start = { theta: theta0_rad, omega: omega0_rad_s, amplitude: A };
		const request = { interval: INTERVAL, count: Math.round(10 / INTERVAL) + 1 };
		const samples = [...sampleCart(shape, start, request)];
		const at = SECONDS.flatMap((seconds) => {
			const sample = samples[Math.round(seconds / INTERVAL)];
			return [
				[`theta_at_${seconds}s`, sample?.theta],
				[`omega_at_${seconds}s`, sample?.omega],
				[`force_at_${seconds}s`, sample?.force],
				[`mean_square_force_0_${seconds}s`, measureCart(shape, start, seconds).effort]
			] as const;
		});
		const bits = computeInformation(shape, start, 10);
		return {
			...Object.fromEntries(at),
			mutual_information_bits_10s: new Judged(bits, { tolerance: INFORMATION_TOLERANCE })
		};
	}
);
