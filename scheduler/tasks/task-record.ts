import { z } from 'zod';

/** Longest formula that is read, in characters. */
export const FORMULA_LENGTH_MAX = 1000;

const variableSchema = z
	.strictObject({
		/** As in the trial file and in formulas: a letter, then letters, digits or underscores. */
		name: z.string().regex(/^[A-Za-z_][A-Za-z0-9_]{0,63}$/),
		unit: z.string().max(32),
		/** Lowest and highest possible value, in `unit`. */
		min: z.number(),
		max: z.number(),
		/** Where scaled coordinates have their zero, in `unit`. */
		origin: z.number(),
		/** One standard deviation of a practised baseline cloud, in `unit`. */
		scale: z.number().positive(),
		/** Smallest difference that the rig can measure, in `unit`; 0 when unknown. */
		resolution: z.number().nonnegative().default(0)
	})
	.refine(({ min, max }) => min < max, { error: 'min must lie below max', path: ['min'] })
	.refine(({ min, max, origin }) => origin >= min && origin <= max, {
		error: 'origin must lie between min and max',
		path: ['origin']
	});

const positive = z.number().positive();
const tolerance = positive.describe('largest miss that counts as a hit, in the unit of the result');
const resultUnit = z.string().max(32);
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
		formulaRecordSchema
	])
	.refine(({ variables }) => new Set(variables.map(({ name }) => name)).size === variables.length, {
		error: 'each variable needs a name of its own',
		path: ['variables']
	});

export type TaskVariable = z.output<typeof variableSchema>;
export type TaskRecord = z.output<typeof taskRecordSchema>;
export type TaskRecordInput = z.input<typeof taskRecordSchema>;
export type PuckRecord = z.output<typeof puckRecordSchema>;
export type ProjectileRecord = z.output<typeof projectileRecordSchema>;
export type LinearRecord = z.output<typeof linearRecordSchema>;
export type FormulaRecord = z.output<typeof formulaRecordSchema>;
