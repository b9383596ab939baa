import { z } from 'zod';

/** How an approver settles a held decision. A change asks for another share, with a reason. */
export const settleInputSchema = z
	.object({
		action: z.enum(['use', 'change', 'plain-practice']),
		reason: z.string().trim().max(2000).default(''),
		/** For a change: a size between 30 % and 100 % of the proposed region's axes. */
		sizePercent: z.number().int().min(30).max(100).default(100)
	})
	.superRefine((input, context) => {
		if (input.action !== 'use' && input.reason.length < 8) {
			context.addIssue({
				code: 'custom',
				path: ['reason'],
				message: 'Say why, in a sentence: it is kept with the decision and reported as a deviation'
			});
		}
	});

export type SettleInput = z.output<typeof settleInputSchema>;
