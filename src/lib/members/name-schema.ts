import { z } from 'zod';

export const nameSchema = z.object({
	name: z.string().trim().min(1, 'Write your name.').max(80, 'At most 80 characters.')
});
