import {
	chmodSync,
	mkdtempSync,
	readdirSync,
	readFileSync,
	rmSync,
	statSync,
	writeFileSync
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { chooseAccounts } from './accounts.mjs';
import { choosePostgres } from './choose-postgres.mjs';
import { createCluster, runsOn, startCluster, stopLeftover } from './cluster.mjs';
import { findPostgres } from './find-postgres.mjs';
import { isSameProcess, processStart } from './process-start.mjs';
import { clusterUrl } from './run-sql.mjs';

const prefix = 'ovalry-test-';

/**
 * A cluster for tests: below the system's temporary folder, on a free loopback port, without the
 * waits that make data safe. The caller ends it through `processes` and then calls `remove`.
 */
export async function openThrowawayCluster({ processes, say }) {
	await removeAbandoned();
	const isRoot = process.getuid?.() === 0;
	const account = chooseAccounts({ isRoot, say, needsDatabase: true }).database;
	const home = mkdtempSync(join(tmpdir(), prefix));
	chmodSync(home, 0o755);
	writeFileSync(join(home, 'owner.json'), JSON.stringify(ownNote()));
	const folder = join(home, 'cluster');
	const { bin } = choosePostgres(folder, findPostgres({ given: process.env.OVALRY_POSTGRES_BIN }));
	const password = 'throw-away';
	await createCluster({ bin, folder, account, password, processes, durable: false });
	const options = ['fsync=off', 'synchronous_commit=off', 'full_page_writes=off'];
	const { port } = await startCluster({
		bin,
		folder,
		account,
		processes,
		logFile: join(home, 'postgres.log'),
		say,
		options: options.flatMap((option) => ['-c', option])
	});
	return {
		url: clusterUrl({ port, password, database: 'postgres' }),
		home,
		remove: () => rmSync(home, { recursive: true, force: true })
	};
}

const ownNote = () => ({ pid: process.pid, startedAt: processStart(process.pid) });

/** Removes clusters whose test run was killed. */
async function removeAbandoned() {
	const homes = readdirSync(tmpdir()).filter((name) => name.startsWith(prefix));
	for (const home of homes.map((name) => join(tmpdir(), name)).filter(isOwn)) {
		const owner = readOwner(home);
		if (!owner || isSameProcess(owner)) continue;
		await stopLeftover({ folder: join(home, 'cluster'), isSameServer: runsOn });
		rmSync(home, { recursive: true, force: true });
	}
}

const isOwn = (path) => statSync(path).uid === process.getuid?.();

function readOwner(home) {
	try {
		return JSON.parse(readFileSync(join(home, 'owner.json'), 'utf8'));
	} catch {
		return null;
	}
}
