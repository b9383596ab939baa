import { sql } from 'drizzle-orm';
import PgBoss from 'pg-boss';
import type { Queryable } from '$lib/server/db/client';
import type { QueueName } from './queues';

export type Jobs = {
	/** Works a queue, one job at a time; `handle` throws to have the job tried again. */
	work(queue: QueueName, handle: (data: Record<string, unknown>) => Promise<void>): Promise<void>;
	stop(): Promise<void>;
};

/** Connects to the job queues that the migration made. */
export async function openJobs(
	url: string,
	onError: (message: string) => void = console.error
): Promise<Jobs> {
	const boss = new PgBoss({
		connectionString: url,
		migrate: false,
		supervise: false,
		schedule: false,
		max: 3
	});
	boss.on('error', (error: Error) => onError(error.message));
	await boss.start();
	return {
		async work(queue, handle) {
			await boss.work<Record<string, unknown>>(
				queue,
				{ pollingIntervalSeconds: 0.5 },
				async (found) => {
					for (const job of found) await handle(job.data);
				}
			);
		},
		stop: () => boss.stop({ graceful: true, wait: true, timeout: 2_000 })
	};
}

/**
 * Puts a job into the queue inside the caller's transaction: it exists if and only if the
 * transaction commits.
 */
export async function enqueue(
	tx: Queryable,
	queue: QueueName,
	data: Record<string, unknown>
): Promise<void> {
	await tx.execute(sql`
		insert into pgboss.job (name, data, retry_limit, retry_delay, retry_backoff, policy)
		select q.name, ${JSON.stringify(data)}::jsonb, 5, 5, true, q.policy
		from pgboss.queue as q where q.name = ${queue}`);
}
