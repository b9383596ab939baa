import { z } from 'zod';

export const signInSchema = z.object({
	email: z
		.string()
		.trim()
		.toLowerCase()
		.max(254, 'At most 254 characters.')
		.pipe(z.email('Write the whole address, such as name@university.example.')),
	/** Where to go on to after sign-in. */
	to: z.string().max(2000).default('')
});
