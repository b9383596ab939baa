import { cpSync, existsSync, mkdirSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { inject } from 'vitest';
import { createDatabase, type TestDatabase } from './create-database';
import { onCluster, type TestCluster } from './test-cluster';

/** Any number will do, as long as nothing else takes it on the test cluster. */
const lockKey = 7_205_002;

/**
 * Copies the seeded demo: its database, and the files that belong to it (keys, secrets, people). The
 * demo takes half a minute to make, so it is made once in a test run, by the first who asks.
 *
 * @param home an empty folder for the copied files
 * @param make migrates and seeds a database, with its files in the folder it is given
 */
export async function copyDemo(
	home: string,
	make: (home: string, database: TestDatabase) => Promise<void>
): Promise<TestDatabase> {
	const cluster: TestCluster = inject('testCluster');
	const name = `${cluster.template}_demo`;
	const source = join(cluster.files, 'demo');
	await onCluster(cluster, async (sql) => {
		await sql`select pg_advisory_lock(${lockKey})`;
		const found = await sql`select 1 from pg_database where datname = ${name}`;
		if (found.length > 0) return;
		rmSync(source, { recursive: true, force: true });
		makeHomeFolders(source);
		const database = await createDatabase();
		await make(source, database);
		await sql.unsafe(`alter database ${database.name} rename to ${name}`);
	});
	cpSync(source, home, { recursive: true });
	return createDatabase(name);
}

/** The folders that a running application has. */
export function makeHomeFolders(home: string): void {
	for (const name of ['keys', 'mailbox', 'logs']) {
		const folder = join(home, name);
		if (!existsSync(folder)) mkdirSync(folder, { recursive: true, mode: 0o700 });
	}
}
