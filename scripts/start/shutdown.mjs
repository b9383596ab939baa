import { setTimeout as wait } from 'node:timers/promises';

/**
 * Ends everything that was started, within three seconds: first the programs that use the database,
 * then PostgreSQL; what does not follow is killed. PostgreSQL ended that way repairs itself at the
 * next start.
 */
export async function shutDown(processes) {
	processes.close();
	const begun = Date.now();
	const others = () => processes.names().filter((name) => name !== 'postgres');
	processes.signalAll('SIGTERM', others());
	await until(() => others().length === 0, begun + 1_300);
	processes.signalAll('SIGKILL', others());
	processes.signalAll('SIGINT', ['postgres']);
	await until(() => processes.names().length === 0, begun + 2_200);
	processes.signalAll('SIGQUIT', ['postgres']);
	await until(() => processes.names().length === 0, begun + 2_600);
	processes.signalAll('SIGKILL');
}

async function until(isTrue, deadline) {
	while (!isTrue() && Date.now() < deadline) await wait(10);
}
