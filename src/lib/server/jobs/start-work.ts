import type { Logger } from 'pino';
import { createClock, type Clock } from '$lib/server/clock';
import type { Settings } from '$lib/server/config';
import type { Database } from '$lib/server/db/client';
import { loadInstance } from '$lib/server/instance/load-instance';
import type { Jobs } from './open-jobs';
import { dueWork, queueWork } from './work-table';

export type WorkContext = { db: Database; clock: Clock; settings: Settings; log: Logger };
type Options = { db: Database; jobs: Jobs; settings: Settings; log: Logger };

const tickMs = 1_000;

/** Starts working the queues and the due list; the returned function stops after the running step. */
export async function startWork({
	db,
	jobs,
	settings,
	log
}: Options): Promise<() => Promise<void>> {
	const context = async (): Promise<WorkContext> => {
		const instance = await loadInstance(db);
		return { db, clock: createClock(instance?.clockOffsetMs ?? 0), settings, log };
	};
	for (const { queue, work } of queueWork) {
		await jobs.work(queue, async (data) => work(await context(), data));
	}
	let stopped = false;
	const loop = (async () => {
		while (!stopped) {
			await runDueWork(await context().catch(() => null), log);
			await new Promise((resolve) => setTimeout(resolve, tickMs));
		}
	})();
	return async () => {
		stopped = true;
		await loop;
	};
}

async function runDueWork(context: WorkContext | null, log: Logger): Promise<void> {
	if (!context) return;
	for (const { name, work } of dueWork) {
		try {
			await work(context);
		} catch (error) {
			log.error({ due: name, fault: error instanceof Error ? error.name : 'unknown' });
		}
	}
}
