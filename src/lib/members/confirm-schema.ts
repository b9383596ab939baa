import { z } from 'zod';

/** What a mailed sign-in link holds. */
export const confirmSchema = z.object({
	callbackUrl: z.string().max(2000),
	token: z.string().min(20).max(200),
	email: z.string().min(3).max(254)
});
