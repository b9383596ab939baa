import { workAmendments } from '$lib/server/amendments/amendment-work';
import { workDecide, workDueDecisions } from '$lib/server/decisions/decision-work';
import { workEnvelopes } from '$lib/server/envelope/envelope-work';
import { workMail } from '$lib/server/invitations/mail-work';
import type { QueueName } from './queues';
import type { WorkContext } from './start-work';

type QueueWork = {
	queue: QueueName;
	work(context: WorkContext, data: Record<string, unknown>): Promise<void>;
};
type DueWork = { name: string; work(context: WorkContext): Promise<void> };

/** What each queue's jobs do. */
export const queueWork: QueueWork[] = [{ queue: 'decide', work: workDecide }];

/** What falls due by the clock, looked at every second. */
export const dueWork: DueWork[] = [
	{ name: 'amendments', work: workAmendments },
	{ name: 'decisions', work: workDueDecisions },
	{ name: 'envelopes', work: workEnvelopes },
	{ name: 'send-mail', work: workMail }
];
