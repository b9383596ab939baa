import { z } from 'zod';

const parts = z.object({
	type: z.enum(['puck', 'formula']),
	puck: z.object({ mu: z.unknown(), g: z.unknown(), D: z.unknown() }).loose(),
	formula: z.object({}).loose()
});

/** A task of an older draft, which kept a puck and a formula side by side; any other comes back as it is. */
export function upgradeTask(stored: unknown): unknown {
	const old = parts.safeParse(stored);
	if (!old.success) return stored;
	const { type, puck, formula } = old.data;
	if (type === 'formula') return { ...formula, type, numbers: {}, choices: {} };
	const { mu, g, D, ...rest } = puck;
	return { ...rest, type, numbers: { mu, g, D }, choices: {}, formula: '', resultUnit: 'm' };
}
