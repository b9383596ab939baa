import { z } from 'zod';

/** A number that JSON can hold; an end that is infinite is null. */
export const endSchema = z.number().nullable().describe('null: without end');

export function toEnd(value: number): number | null {
	return Number.isFinite(value) ? value : null;
}

export const intervalSchema = z.strictObject({ lower: endSchema, upper: endSchema });

export function toInterval({ lower, upper }: { lower: number; upper: number }) {
	return { lower: toEnd(lower), upper: toEnd(upper) };
}

export const levelSchema = z.number().gt(0).lt(1);
export const sidesSchema = z.union([z.literal(1), z.literal(2)]);

/** An answer of a function that says why it has none. */
export const refusedSchema = z.strictObject({ ok: z.literal(false), reason: z.string() });
