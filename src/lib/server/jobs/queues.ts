/** Names of the job queues; the migration makes them, the worker works them. */
export const queueNames = ['decide'] as const;
export type QueueName = (typeof queueNames)[number];
