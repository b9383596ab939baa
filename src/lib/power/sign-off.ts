import { z } from 'zod';

/** What the statistician says of one frozen version. */
export const signOffSchema = z
	.object({
		protocolHash: z.string().regex(/^[0-9a-f]{64}$/),
		verdict: z.enum(['signed', 'sent-back']),
		comment: z.string().trim().max(4000, 'At most 4000 characters').default('')
	})
	.refine(({ verdict, comment }) => verdict === 'signed' || comment.length >= 10, {
		error: 'Say what has to change, in at least 10 characters',
		path: ['comment']
	});

export type SignOffInput = z.infer<typeof signOffSchema>;
