import { z } from 'zod';

/** Why a study is stopped. */
export const pauseSchema = z.object({
	reason: z
		.string()
		.trim()
		.min(5, 'Say in a few words why, without naming a participant')
		.max(1000, 'At most 1000 characters')
		.default('')
});
