import { compileDual, compileValue } from './formula/compile-formula.ts';
import { parseFormula } from './formula/parse-formula.ts';
import { createArmEndpoint, createArmX } from './models/arm.ts';
import { createCartPendulum } from './models/cart/cart-pendulum.ts';
import { createLinear, createProjectile, createPuck } from './models/first-models.ts';
import { createPaddleBounce } from './models/paddle-bounce.ts';
import { createPuckFriction, createPuckPush } from './models/puck-forms.ts';
import { createTetheredBall } from './models/tether/tethered-ball.ts';
import { createThrowAzimuth, createThrowHeight } from './models/throw-forms.ts';
import { createTwoFinger } from './models/two-finger.ts';
import { createSingleResult, type ResultModel } from './result-model.ts';
import type { FormulaRecord, TaskRecord } from './task-record.ts';
import type { Task } from './task.ts';

/**
 * The task model of a record: result, gradient and what people need to read them.
 *
 * Source:  method sheet A1 to A8; each model in models/.
 * Accuracy: gradients agree with central differences to 1e-6 relative (tasks.property.test.ts).
 * @throws {RangeError} a formula that cannot be read; check it first with parseFormula
 */
export function createTask(record: TaskRecord): Task {
	return {
		variables: record.variables,
		resultUnit: record.resultUnit,
		tolerance: record.tolerance,
		variableCount: record.variables.length,
		...createModel(record)
	};
}

function createModel(record: TaskRecord): ResultModel {
	switch (record.type) {
		case 'puck':
			return createPuck(record);
		case 'projectile':
			return createProjectile(record);
		case 'linear':
			return createLinear(record);
		case 'formula':
			return createFormula(record);
		case 'tethered-ball':
			return createTetheredBall(record);
		case 'paddle-bounce':
			return createPaddleBounce(record);
		case 'throw-height':
			return createThrowHeight(record);
		case 'throw-azimuth':
			return createThrowAzimuth(record);
		case 'puck-push':
			return createPuckPush(record);
		case 'puck-friction':
			return createPuckFriction(record);
		case 'two-finger':
			return createTwoFinger(record);
		case 'arm-endpoint':
			return createArmEndpoint(record);
		case 'arm-x':
			return createArmX(record);
		case 'cart-pendulum':
			return createCartPendulum(record);
	}
}

function createFormula({ formula, variables }: FormulaRecord): ResultModel {
	const parsed = parseFormula(
		formula,
		variables.map(({ name }) => name)
	);
	if (!parsed.ok)
		throw new RangeError(`formula, character ${parsed.position + 1}: ${parsed.message}`);
	const value = compileValue(parsed.expression);
	const dual = compileDual(parsed.expression, variables.length);
	return createSingleResult({
		evaluate: (x) => {
			const result = value(x);
			return Number.isFinite(result) ? result : Number.NaN;
		},
		gradient: (x) => [...dual(x).slopes]
	});
}
