import { z } from 'zod';
import type { Matrix } from '../../linear-algebra/vector.ts';
import type { Task } from '../../tasks/task.ts';
import {
	convertExecutions,
	createLogSystem,
	createScaledSystem,
	createVelocitySystem,
	type CoordinateSystem
} from '../../variability/coordinates.ts';

/** The second coordinate system that stands beside each covariance measure. */
export const secondSystemSchema = z.discriminatedUnion('kind', [
	z.strictObject({ kind: z.literal('log').describe('logarithms of positive variables') }),
	z.strictObject({ kind: z.literal('units').describe('the variables in their own units') }),
	z.strictObject({
		kind: z.literal('scaled').describe('units of another scale'),
		scale: z.array(z.number().positive()).describe('one a variable, in its unit')
	}),
	z.strictObject({
		kind: z.literal('velocity').describe('parts of a velocity in place of angle and speed'),
		angle: z.string().describe('name of the variable'),
		speed: z.string().describe('name of the variable'),
		radPerUnit: z
			.number()
			.positive()
			.default(Math.PI / 180)
	})
]);

export type SecondSystem = z.output<typeof secondSystemSchema>;

/** The declared scale of the task: the first system of every measure. */
export function createFirstSystem({ variables }: Task): CoordinateSystem {
	return createScaledSystem({
		origin: variables.map(({ origin }) => origin),
		scale: variables.map(({ scale }) => scale)
	});
}

/**
 * The second system asked for; without one logarithms where all trials are positive, else plain units.
 * @throws {RangeError} a name or a count of scales that does not fit the task
 */
export function createSecondSystem(
	task: Task,
	blocks: readonly Matrix[],
	wanted?: SecondSystem
): CoordinateSystem {
	if (wanted) return createWanted(task, wanted);
	const log = createLogSystem();
	const isPositive = blocks.every((trials) => convertExecutions(trials, log) !== null);
	return isPositive ? log : createUnits(task);
}

function createWanted(task: Task, wanted: SecondSystem): CoordinateSystem {
	if (wanted.kind === 'log') return createLogSystem();
	if (wanted.kind === 'units') return createUnits(task);
	if (wanted.kind === 'scaled')
		return createScaledSystem({
			origin: task.variables.map(({ origin }) => origin),
			...{ scale: wanted.scale, name: 'other scale' }
		});
	return createVelocitySystem({
		angleAxis: findAxis(task, wanted.angle),
		speedAxis: findAxis(task, wanted.speed),
		radPerUnit: wanted.radPerUnit
	});
}

function createUnits({ variables }: Task): CoordinateSystem {
	return createScaledSystem({
		...{ name: 'units', origin: variables.map(() => 0), scale: variables.map(() => 1) }
	});
}

function findAxis({ variables }: Task, name: string): number {
	const axis = variables.findIndex((variable) => variable.name === name);
	if (axis < 0) throw new RangeError(`second: the task has no variable “${name}”`);
	return axis;
}

/** What a measure in two systems looks like on paper. */
export const comparisonSchema = z.union([
	z.strictObject({
		ok: z.literal(true),
		first: z.strictObject({ system: z.string(), value: z.number() }),
		second: z.strictObject({ system: z.string(), value: z.number() }),
		ratio: z.number().nullable(),
		hasSignFlip: z.boolean()
	}),
	z.strictObject({ ok: z.literal(false), reason: z.string(), system: z.string() })
]);
