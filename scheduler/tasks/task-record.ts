import { z } from 'zod';
import { armEndpointRecordSchema, armXRecordSchema } from './models/arm-record.ts';
import { cartPendulumRecordSchema } from './models/cart/cart-record.ts';
import { paddleBounceRecordSchema } from './models/paddle-record.ts';
import { puckFrictionRecordSchema, puckPushRecordSchema } from './models/puck-records.ts';
import { tetheredBallRecordSchema } from './models/tether/tether-record.ts';
import { throwAzimuthRecordSchema, throwHeightRecordSchema } from './models/throw-records.ts';
import { twoFingerRecordSchema } from './models/two-finger.ts';
import { positive, resultUnit, tolerance, variableSchema } from './task-variable.ts';

/** Longest formula that is read, in characters. */
export const FORMULA_LENGTH_MAX = 1000;

const pair = z.array(variableSchema).length(2);

/** Sliding puck: release speed v and release position x₀; result x₀ + v²/(2·μ·g) − D. */
export const puckRecordSchema = z.strictObject({
	type: z.literal('puck'),
	mu: positive.describe('friction coefficient μ, a ratio'),
	g: positive.describe('gravity, m/s²'),
	D: z.number().describe('distance of the target, m'),
	tolerance,
	resultUnit: resultUnit.default('m'),
	variables: pair
});

/** Drag-free throw: release speed v and release angle θ in degrees; result = height error at D. */
export const projectileRecordSchema = z.strictObject({
	type: z.literal('projectile'),
	h: z.number().describe('release height, m'),
	D: positive.describe('distance of the target plane, m'),
	H: z.number().describe('height of the target, m'),
	g: positive.describe('gravity, m/s²'),
	tolerance,
	resultUnit: resultUnit.default('m'),
	variables: pair
});

/** Weighted sum of the variables less a target, for instance two finger forces. */
export const linearRecordSchema = z
	.strictObject({
		type: z.literal('linear'),
		coef: z.array(z.number()).min(1).max(12).describe('one weight for each variable'),
		target: z.number(),
		tolerance,
		resultUnit: resultUnit.default(''),
		variables: z.array(variableSchema).min(1).max(12)
	})
	.refine(({ coef, variables }) => coef.length === variables.length, {
		error: 'coef must hold one weight for each variable',
		path: ['coef']
	});

/** A formula of the lab's own over named variables; its value is the signed error. */
export const formulaRecordSchema = z.strictObject({
	type: z.literal('formula'),
	formula: z.string().min(1).max(FORMULA_LENGTH_MAX),
	tolerance,
	resultUnit,
	variables: z.array(variableSchema).min(1).max(12)
});

/** A task as it is stored in a protocol version: plain JSON. */
export const taskRecordSchema = z
	.discriminatedUnion('type', [
		puckRecordSchema,
		projectileRecordSchema,
		linearRecordSchema,
		formulaRecordSchema,
		tetheredBallRecordSchema,
		paddleBounceRecordSchema,
		throwHeightRecordSchema,
		throwAzimuthRecordSchema,
		puckPushRecordSchema,
		puckFrictionRecordSchema,
		twoFingerRecordSchema,
		armEndpointRecordSchema,
		armXRecordSchema,
		cartPendulumRecordSchema
	])
	.refine(({ variables }) => new Set(variables.map(({ name }) => name)).size === variables.length, {
		error: 'each variable needs a name of its own',
		path: ['variables']
	});

export type { TaskVariable } from './task-variable.ts';
export type TaskType = TaskRecord['type'];
export type TaskRecord = z.output<typeof taskRecordSchema>;
export type TaskRecordInput = z.input<typeof taskRecordSchema>;
export type PuckRecord = z.output<typeof puckRecordSchema>;
export type ProjectileRecord = z.output<typeof projectileRecordSchema>;
export type LinearRecord = z.output<typeof linearRecordSchema>;
export type FormulaRecord = z.output<typeof formulaRecordSchema>;
