import type { CartShape } from './cart-record.ts';

/** Pendulum angle from straight down, rad, and its rate, rad/s. */
export interface PendulumState {
	readonly theta: number;
	readonly omega: number;
}

/** The moved cart with its pendulum at one time. */
export interface CartSample extends PendulumState {
	readonly time: number;
	/** Force on the cart, N. */
	readonly force: number;
	/** Jerk of the cart and of the bob (size), m/s³. */
	readonly cartJerk: number;
	readonly bobJerk: number;
}

export interface CartStart extends PendulumState {
	/** Amplitude A of the cart's motion x(t) = A·sin 2πft, m. */
	readonly amplitude: number;
}

/**
 * The pendulum of a cart that is moved as A·sin 2πft, sampled evenly from t = 0.
 *
 * Units:   s, rad, N.
 * Method:  l·θ̈ + ẍ·cos θ + g·sin θ + b·l·θ̇ = 0 by Runge-Kutta of order 4 with steps no longer than the
 *          sampling interval; step halving in cart-motion.test.ts.
 * Source:  method sheet A8; cases cart-1 to cart-6 (independent integration), 1e-5 relative.
 * @param count samples, the first at t = 0
 */
export function* sampleCart(
	shape: CartShape,
	start: CartStart,
	{ interval, count, stepsEach = 1 }: { interval: number; count: number; stepsEach?: number }
): Generator<CartSample> {
	const { amplitude } = start;
	const state = { theta: start.theta, omega: start.omega };
	const step = interval / stepsEach;
	for (let i = 0; i < count; i++) {
		yield describe(shape, amplitude, state, i * interval);
		for (let k = 0; k < stepsEach; k++)
			advance(shape, amplitude, state, i * interval + k * step, step);
	}
}

/** One Runge-Kutta step, in place: a map of transports takes millions of them. */
function advance(
	shape: CartShape,
	amplitude: number,
	state: { theta: number; omega: number },
	time: number,
	h: number
): void {
	const { theta, omega } = state;
	const begin = cartAcceleration(shape, amplitude, time);
	const middle = cartAcceleration(shape, amplitude, time + h / 2);
	const end = cartAcceleration(shape, amplitude, time + h);
	const a1 = computeAngularAcceleration(shape, begin, theta, omega);
	const w2 = omega + (h / 2) * a1;
	const a2 = computeAngularAcceleration(shape, middle, theta + (h / 2) * omega, w2);
	const w3 = omega + (h / 2) * a2;
	const a3 = computeAngularAcceleration(shape, middle, theta + (h / 2) * w2, w3);
	const w4 = omega + h * a3;
	const a4 = computeAngularAcceleration(shape, end, theta + h * w3, w4);
	state.theta = theta + (h / 6) * (omega + 2 * w2 + 2 * w3 + w4);
	state.omega = omega + (h / 6) * (a1 + 2 * a2 + 2 * a3 + a4);
}

function cartAcceleration({ frequency }: CartShape, amplitude: number, time: number): number {
	const pace = 2 * Math.PI * frequency;
	return -amplitude * pace ** 2 * Math.sin(pace * time);
}

function computeAngularAcceleration(
	{ length, damping, g }: CartShape,
	acceleration: number,
	theta: number,
	omega: number
): number {
	return -(acceleration * Math.cos(theta) + g * Math.sin(theta)) / length - damping * omega;
}

/** F = (M+m)·ẍ + m·l·(θ̈·cos θ − θ̇²·sin θ); jerks by differentiating the motion once more. */
function describe(
	shape: CartShape,
	amplitude: number,
	{ theta, omega }: PendulumState,
	time: number
): CartSample {
	const { cartMass, bobMass, length, damping, frequency, g } = shape;
	const pace = 2 * Math.PI * frequency;
	const acceleration = cartAcceleration(shape, amplitude, time);
	const cartJerk = -amplitude * pace ** 3 * Math.cos(pace * time);
	const [cos, sin] = [Math.cos(theta), Math.sin(theta)];
	const alpha = computeAngularAcceleration(shape, acceleration, theta, omega);
	const change =
		-(cartJerk * cos - acceleration * sin * omega + g * cos * omega) / length - damping * alpha;
	const force =
		(cartMass + bobMass) * acceleration + bobMass * length * (alpha * cos - omega ** 2 * sin);
	const jerkX = cartJerk + length * (change * cos - 3 * alpha * omega * sin - omega ** 3 * cos);
	const jerkY = length * (change * sin + 3 * alpha * omega * cos - omega ** 3 * sin);
	const bobJerk = Math.sqrt(jerkX * jerkX + jerkY * jerkY);
	return { time, theta, omega, force, cartJerk, bobJerk };
}
