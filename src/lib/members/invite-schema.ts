import { z } from 'zod';

export const inviteSchema = z.object({
	name: z
		.string()
		.trim()
		.min(1, 'Write their name.')
		.max(80, 'At most 80 characters.')
		.refine(
			(text) => !/[\p{Cc}\p{Cf}]/u.test(text),
			'Write it on one line, plain characters only.'
		),
	email: z
		.string()
		.trim()
		.toLowerCase()
		.max(254, 'At most 254 characters.')
		.pipe(z.email('Write the whole address, such as name@university.example.')),
	isSteward: z.boolean().default(false)
});

/** Names one member in a form with a single button. */
export const memberSchema = z.object({
	personId: z.uuid(),
	isSteward: z
		.enum(['yes', 'no'])
		.default('no')
		.transform((word) => word === 'yes')
});
