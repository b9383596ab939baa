import { mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { chooseAccounts } from './accounts.mjs';
import { requirePackages } from './debian-packages.mjs';
import { StartFailure } from './failure.mjs';
import { findPostgres } from './find-postgres.mjs';
import { makeHome } from './folders.mjs';
import { endLeftovers } from './leftovers.mjs';
import { takeLock } from './lock.mjs';
import { readSecrets } from './secrets.mjs';

/**
 * PostgreSQL and the accounts are there, the data folder is chosen and locked, and nothing that an
 * earlier start left behind runs any more.
 */
export async function openHome({ settings, processes, say, onLock }) {
	const isRoot = process.getuid?.() === 0;
	const needsDatabase = !settings.databaseUrl;
	if (needsDatabase) await requirePostgres({ settings, processes, say, isRoot });
	const accounts = chooseAccounts({ isRoot, say, needsDatabase });
	const home = makeHome(settings.dataFolder, accounts);
	const lock = takeLock(join(home, 'lock'), { address: settings.origin });
	if (!lock.held) throw alreadyRuns(home, lock.by);
	onLock(lock);
	const list = join(home, 'running.json');
	const left = await endLeftovers(list);
	if (left > 0) say(`Ended ${left} programs that an earlier start left behind when it was killed`);
	processes.noteIn(list);
	const logs = join(home, 'logs');
	mkdirSync(logs, { recursive: true, mode: 0o755 });
	return { home, accounts, lock, logs, secrets: readSecrets(home), isRoot };
}

/** @returns {Promise<void>} PostgreSQL is on this computer now */
export async function requirePostgres({ settings, processes, say, isRoot }) {
	const isThere = () => findPostgres({ given: settings.postgresBin }).length > 0;
	if (settings.postgresBin && !isThere()) throw notThere(settings.postgresBin);
	await requirePackages([{ name: 'postgresql', what: 'PostgreSQL', isThere }], {
		processes,
		say,
		isRoot
	});
}

function notThere(folder) {
	return new StartFailure(`OVALRY_POSTGRES_BIN: there is no initdb and postgres in ${folder}.`, [
		'Name the folder that holds both, /usr/lib/postgresql/15/bin for instance, or unset it.'
	]);
}

function alreadyRuns(home, { pid, since, address }) {
	return new StartFailure(
		`Ovalry runs already from ${home}: ${address} (process ${pid}, since ${since}).`,
		[
			`Use that one, or stop it first: Ctrl-C in its terminal, or kill ${pid}`,
			'For a second one beside it give it a folder and a port: OVALRY_DATA=/path PORT=3010 npm start'
		]
	);
}
