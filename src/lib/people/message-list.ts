import { z } from 'zod';

/** One mail by code, kind and state; never its text or an address. */
export const messageRowSchema = z.object({
	id: z.string(),
	participantId: z.string().nullable(),
	code: z.string(),
	kind: z.enum(['invitation', 'moved', 'cancelled', 'withdrawn']),
	visitLabel: z.string(),
	visitStartMs: z.number().nullable(),
	state: z.enum(['waiting', 'sent', 'superseded', 'failed', 'unknown']),
	dueAtMs: z.number(),
	sentAtMs: z.number().nullable(),
	attempts: z.number(),
	lastError: z.string().nullable()
});
export type MessageRow = z.infer<typeof messageRowSchema>;

export const messageListSchema = z.object({
	zone: z.string(),
	nowMs: z.number(),
	rows: z.array(messageRowSchema)
});

export const messageViews = ['all', 'waiting', 'sent', 'trouble'] as const;
export type MessageView = (typeof messageViews)[number];

export const messageViewLabels: Record<MessageView, string> = {
	all: 'All',
	waiting: 'Waits',
	sent: 'Sent',
	trouble: 'Needs you'
};

/** Whether a mail belongs to a view. */
export function isInMessageView({ state }: Pick<MessageRow, 'state'>, view: MessageView): boolean {
	if (view === 'all') return true;
	if (view === 'trouble') return state === 'failed' || state === 'unknown';
	return state === view;
}
