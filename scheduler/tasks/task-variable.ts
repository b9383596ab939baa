import { z } from 'zod';

export const variableSchema = z
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

export type TaskVariable = z.output<typeof variableSchema>;

/** A variable in one line: name, unit, range, where scaled coordinates begin, and one baseline SD. */
export function variable(
	name: string,
	unit: string,
	[min, max]: readonly [number, number],
	[origin, scale]: readonly [number, number]
): z.input<typeof variableSchema> {
	return { name, unit, min, max, origin, scale };
}

export const positive = z.number().positive();
export const tolerance = positive.describe(
	'largest miss that counts as a hit, in the unit of the result'
);
export const resultUnit = z.string().max(32);
export const gravity = positive.default(9.81).describe('gravity, m/s²');
