import { z } from 'zod';

/** What is decided before sealing: nothing but the sizes that blocks may have. */
export const sealInputSchema = z.object({
	protocolHash: z.string().regex(/^[0-9a-f]{64}$/),
	blockSizes: z
		.array(z.coerce.number().int().min(1).max(60))
		.min(1, 'Choose the sizes that blocks may have')
		.max(8)
});

export type SealInput = z.infer<typeof sealInputSchema>;

/** Sizes that fit a number of arms, smallest first; one arm needs no blocks. */
export function listBlockSizes(armCount: number): number[] {
	return armCount < 2 ? [1] : [1, 2, 3, 4].map((factor) => factor * armCount);
}

/** The middle two: neither guessed easily nor far from balance. */
export function suggestBlockSizes(armCount: number): number[] {
	const sizes = listBlockSizes(armCount);
	return sizes.length < 3 ? sizes : sizes.slice(1, 3);
}
