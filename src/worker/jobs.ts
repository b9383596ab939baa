import { config } from '$lib/server/config';
import { logger } from '$lib/server/http/logger';
import { loadInstance, requireMatchingMode } from '$lib/server/instance/load-instance';
import { closeRuntime, runtimeDatabase, runtimeJobs } from '$lib/server/runtime';
import { startWork } from '$lib/server/jobs/start-work';

/** The second process: works the job queues, and does what falls due by the clock. */
const db = runtimeDatabase();
requireMatchingMode(config().OVALRY_MODE, await loadInstance(db));
const stopWork = await startWork({
	db,
	jobs: await runtimeJobs(),
	settings: config(),
	log: logger()
});
logger().info('worker ready');

async function stop(): Promise<void> {
	await stopWork();
	await closeRuntime();
	process.exit(0);
}
for (const signal of ['SIGTERM', 'SIGINT'] as const) process.once(signal, () => void stop());
