import { z } from 'zod';

/** What a participant can say to a visit. */
export const answerSchema = z
	.object({
		answer: z.enum(['accepted', 'declined', 'asks-other-time'], {
			error: 'Choose one of the three answers'
		}),
		note: z
			.string()
			.trim()
			.max(500, 'Write at most 500 characters; for more, please call')
			.default('')
	})
	.refine(({ answer, note }) => answer !== 'asks-other-time' || note !== '', {
		path: ['note'],
		error: 'Write when you could come, such as “Tuesday or Thursday after 15:00”'
	});

export type AnswerInput = z.infer<typeof answerSchema>;
