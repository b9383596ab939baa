import { z } from 'zod';
import {
	gravity,
	positive,
	resultUnit,
	tolerance,
	variable,
	variableSchema
} from '../../task-variable.ts';

/** What a transport is judged by. */
export const CART_MEASURES = ['effort', 'smoothness', 'predictability'] as const;
export type CartMeasure = (typeof CART_MEASURES)[number];

/** The cart, its pendulum and how they are moved, without what a trial chooses. */
export const cartShape = {
	cartMass: positive.default(2).describe('mass of the cart M, kg'),
	bobMass: positive.default(0.5).describe('mass of the pendulum m, kg'),
	length: positive.default(0.4).describe('length of the pendulum l, m'),
	damping: z.number().nonnegative().default(0.02).describe('damping of the pendulum b, 1/s'),
	frequency: positive.max(10).default(1).describe('pace at which the cart is moved f, Hz'),
	g: gravity
};

/**
 * Rhythmic transport of a cart with a hanging pendulum: angle of the pendulum at the start and amplitude
 * of the cart's motion; result = one measure of the transport less what is asked for.
 */
export const cartPendulumRecordSchema = z.strictObject({
	type: z.literal('cart-pendulum'),
	...cartShape,
	measure: z.enum(CART_MEASURES).default('effort'),
	target: z.number().default(20).describe('value of the measure that is asked for'),
	seconds: positive.max(120).default(3).describe('time over which the measure is taken, s'),
	tolerance: tolerance.default(2),
	resultUnit: resultUnit.default('N²'),
	variables: z
		.array(variableSchema)
		.length(2)
		.prefault(() => [
			variable('theta0_deg', 'deg', [-90, 90], [20, 5]),
			variable('amplitude_m', 'm', [0.02, 0.2], [0.09, 0.005])
		])
});

export type CartPendulumRecord = z.output<typeof cartPendulumRecordSchema>;
export type CartShape = Pick<
	CartPendulumRecord,
	'cartMass' | 'bobMass' | 'length' | 'damping' | 'frequency' | 'g'
>;
