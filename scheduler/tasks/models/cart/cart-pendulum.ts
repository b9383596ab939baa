import { entry, type Vector } from '../../../linear-algebra/vector.ts';
import { createSingleResult, type ResultModel } from '../../result-model.ts';
import { computeMeasure } from './cart-measures.ts';
import type { CartPendulumRecord } from './cart-record.ts';

const RAD_PER_DEG = Math.PI / 180;
/** Step of the central difference, in baseline SD of the variable. */
const STEP_SD = 1e-3;
/** Rounding of a measure of thousands of steps, as a share of its size. */
const ROUNDING_SHARE = 1e-10;
/** Predictability is counted in bins and moves in small jumps: a slope needs a wide step. */
const STEP_SD_COUNTED = 0.25;

/**
 * One measure of a transport less what is asked for; angle at the start in degrees, amplitude in m.
 *
 * Method:  the pendulum starts at rest; slopes by central differences, wide ones for predictability.
 * Accuracy: slopes of effort and smoothness to 1e-5 (task-models.property.test.ts).
 * Source:  method sheet A8.
 */
export function createCartPendulum(record: CartPendulumRecord): ResultModel {
	const { measure, target, seconds, variables } = record;
	const evaluate = (x: Vector) => computeMeasure(measure, record, toStart(x), seconds) - target;
	const slope = (x: Vector, axis: number, step: number) => {
		const at = (sign: number) =>
			evaluate(x.map((value, i) => (i === axis ? value + sign * step : value)));
		return (at(1) - at(-1)) / (2 * step);
	};
	const stepSd = measure === 'predictability' ? STEP_SD_COUNTED : STEP_SD;
	const model = createSingleResult({
		evaluate,
		gradient: (x) => variables.map(({ scale }, axis) => slope(x, axis, stepSd * scale))
	});
	return { ...model, resultRounding: ROUNDING_SHARE * Math.abs(target) };
}

function toStart(x: Vector) {
	return { theta: entry(x, 0) * RAD_PER_DEG, omega: 0, amplitude: entry(x, 1) };
}
