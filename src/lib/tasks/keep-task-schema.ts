import { z } from 'zod';
import { taskDraftSchema, type TaskDraft } from './task-draft';

/** What is sent to keep a task for the lab; the draft as JSON. */
export const keepTaskSchema = z.object({
	name: z.string().trim().min(1, 'Give the task a name.').max(80, 'Longer than 80 characters.'),
	note: z.string().trim().max(300, 'Longer than 300 characters.').default(''),
	/** Version the draft came from; 0 for a task of a new name. */
	basedOn: z.coerce.number().int().min(0).default(0),
	draft: z.string().max(40_000, 'The task is too long to be kept.')
});

/** The draft in a sent form; null for a text that is none. */
export function readSentDraft(text: string): TaskDraft | null {
	try {
		const parsed = taskDraftSchema.safeParse(JSON.parse(text));
		return parsed.success ? parsed.data : null;
	} catch (error) {
		if (error instanceof SyntaxError) return null;
		throw error;
	}
}
