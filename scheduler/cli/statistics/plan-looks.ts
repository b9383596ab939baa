import { z } from 'zod';
import {
	computeBoundaries,
	computeClassicalBoundaries,
	computeInflation
} from '../../power/group-sequential.ts';
import { computeNormalCdf } from '../../statistics/normal.ts';
import { endSchema, sidesSchema, toEnd } from './finite.ts';

const information = z
	.array(z.number().gt(0).max(1))
	.min(1)
	.describe('information at each look as a share of the plan, rising');
const alphaPerSide = z.number().gt(0).lt(0.5).default(0.025);
const asked = {
	alphaPerSide,
	sides: sidesSchema.default(2),
	power: z.number().gt(0).lt(1).default(0.9)
};

export const looksInputSchema = z.discriminatedUnion('spending', [
	z.strictObject({ spending: z.literal('obrien-fleming'), information, ...asked }),
	z.strictObject({ spending: z.literal('pocock'), information, ...asked }),
	z.strictObject({
		...{ spending: z.literal('power'), exponent: z.number().positive(), information, ...asked }
	}),
	z.strictObject({
		spending: z.literal('none').describe('a classical design with equal looks'),
		lookCount: z.number().int().min(1).max(50),
		shape: z.number().min(0).max(0.5).describe('0: Pocock, 0.5: O’Brien-Fleming'),
		...asked
	})
]);

export const looksSchema = z.strictObject({
	looks: z.array(
		z.strictObject({
			information: z.number(),
			z: endSchema,
			nominalP: z.number().describe('one-sided'),
			spentSoFar: z.number().nullable().describe('per side; null in a classical design')
		})
	),
	inflation: z
		.number()
		.nullable()
		.describe('people needed for the power against a single look; null when looks end before 1')
});

/** Boundaries of looks, and what they cost. */
export function planLooks(input: z.output<typeof looksInputSchema>): z.output<typeof looksSchema> {
	const { alphaPerSide: alpha, sides, power } = input;
	const looks = input.spending === 'none' ? listClassical(input) : listSpent(input);
	const shares = looks.map((look) => look.information);
	const inflation =
		shares.at(-1) === 1
			? computeInflation({
					...{ z: looks.map((look) => look.z), information: shares, sides },
					...{ alphaPerSide: alpha, power }
				}).factor
			: null;
	return { looks: looks.map((look) => ({ ...look, z: toEnd(look.z) })), inflation };
}

function listSpent(input: Exclude<z.output<typeof looksInputSchema>, { spending: 'none' }>) {
	const spending =
		input.spending === 'power'
			? { kind: 'power' as const, exponent: input.exponent }
			: { kind: input.spending };
	return computeBoundaries({ ...input, spending }).map(
		({ information: share, z: limit, nominalP, spentSoFar }) => ({
			...{ information: share, z: limit, nominalP, spentSoFar }
		})
	);
}

function listClassical(input: Extract<z.output<typeof looksInputSchema>, { spending: 'none' }>) {
	return computeClassicalBoundaries(input).map((limit, i) => ({
		...{ information: (i + 1) / input.lookCount, z: limit, nominalP: computeNormalCdf(-limit) },
		spentSoFar: null
	}));
}
