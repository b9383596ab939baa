import { dot, entry, type Vector } from '../linear-algebra/vector.ts';
import { compileDual, compileValue } from './formula/compile-formula.ts';
import { parseFormula } from './formula/parse-formula.ts';
import type {
	FormulaRecord,
	LinearRecord,
	ProjectileRecord,
	PuckRecord,
	TaskRecord
} from './task-record.ts';
import type { Task } from './task.ts';

type ResultMap = Pick<Task, 'evaluate' | 'gradient'>;

/**
 * The task model of a record: result, gradient and what people need to read them.
 *
 * Source:  method sheet A3 (throw), A4 (puck), A5 (force sum), A7 (formula).
 * Accuracy: gradients agree with central differences to 1e-6 relative (create-task.property.test.ts).
 * @throws {RangeError} a formula that cannot be read; check it first with parseFormula
 */
export function createTask(record: TaskRecord): Task {
	return {
		variables: record.variables,
		resultUnit: record.resultUnit,
		tolerance: record.tolerance,
		variableCount: record.variables.length,
		resultCount: 1,
		...createResultMap(record)
	};
}

function createResultMap(record: TaskRecord): ResultMap {
	switch (record.type) {
		case 'puck':
			return createPuck(record);
		case 'projectile':
			return createProjectile(record);
		case 'linear':
			return createLinear(record);
		case 'formula':
			return createFormula(record);
	}
}

/** f = x₀ + k·v² − D with k = 1/(2μg). */
function createPuck({ mu, g, D }: PuckRecord): ResultMap {
	const k = 1 / (2 * mu * g);
	return {
		evaluate: (x) => entry(x, 1) + k * entry(x, 0) ** 2 - D,
		gradient: (x) => [2 * k * entry(x, 0), 1]
	};
}

/** f = h + D·tan θ − g·D²/(2·v²·cos²θ) − H, θ in degrees. */
function createProjectile({ h, D, H, g }: ProjectileRecord): ResultMap {
	const radPerDeg = Math.PI / 180;
	return {
		evaluate: (x) => {
			const [v, theta] = [entry(x, 0), entry(x, 1) * radPerDeg];
			return h + D * Math.tan(theta) - (g * D ** 2) / (2 * v ** 2 * Math.cos(theta) ** 2) - H;
		},
		gradient: (x) => {
			const [v, theta] = [entry(x, 0), entry(x, 1) * radPerDeg];
			const cosSquared = Math.cos(theta) ** 2;
			const bySpeed = (g * D ** 2) / (v ** 3 * cosSquared);
			const byAngle = D / cosSquared - (g * D ** 2 * Math.tan(theta)) / (v ** 2 * cosSquared);
			return [bySpeed, radPerDeg * byAngle];
		}
	};
}

function createLinear({ coef, target }: LinearRecord): ResultMap {
	return { evaluate: (x: Vector) => dot(coef, x) - target, gradient: () => [...coef] };
}

function createFormula({ formula, variables }: FormulaRecord): ResultMap {
	const parsed = parseFormula(
		formula,
		variables.map(({ name }) => name)
	);
	if (!parsed.ok)
		throw new RangeError(`formula, character ${parsed.position + 1}: ${parsed.message}`);
	const value = compileValue(parsed.expression);
	const dual = compileDual(parsed.expression, variables.length);
	return {
		evaluate: (x) => {
			const result = value(x);
			return Number.isFinite(result) ? result : Number.NaN;
		},
		gradient: (x) => [...dual(x).slopes]
	};
}
