import { join } from 'node:path';
import { choosePostgres } from './choose-postgres.mjs';
import { createCluster, runsOn, startCluster, stopLeftover } from './cluster.mjs';
import { givenFolder, provideDatabase } from './databases.mjs';
import { StartFailure } from './failure.mjs';
import { findPostgres } from './find-postgres.mjs';
import { chooseVariant, readInstanceKind } from './instance-kind.mjs';
import { findDemoFaults, badSettings } from './settings.mjs';

/**
 * Opens the database this start works on, the own cluster's or the one of DATABASE_URL, migrated
 * and seeded.
 *
 * @returns {Promise<{ variant: string, ownerUrl: string, folder: string, said: object, ended: Promise<never> }>}
 */
export function openDatabase(state, fill) {
	return state.settings.databaseUrl ? openGiven(state, fill) : openOwn(state, fill);
}

async function openOwn(state, fill) {
	const { home, choice, processes } = state;
	const variant = choice.variant ?? 'demo';
	const { cluster, ended } = await openCluster(state);
	let said = {};
	const plan = { variant, fresh: choice.fresh, home, cluster: { ...cluster, processes } };
	const database = await provideDatabase(plan, async (target) => {
		said = await fill({ ...target, variant });
	});
	return { ...database, variant, said, ended };
}

/** The own cluster, made if missing, started on a free loopback port. */
export async function openCluster({ home, accounts, logs, secrets, settings, processes, say }) {
	const folder = join(home, 'cluster');
	const account = accounts.database;
	const { bin } = choosePostgres(folder, findPostgres({ given: settings.postgresBin }));
	if (await stopLeftover({ folder, isSameServer: runsOn })) {
		say('Ended a PostgreSQL that an earlier start left behind');
	}
	await createCluster({ bin, folder, account, password: secrets.ownerPassword, processes });
	const logFile = join(logs, 'postgres.log');
	const { port, child } = await startCluster({ bin, folder, account, processes, logFile, say });
	const ended = new Promise((_, fail) => child.once('exit', () => fail(clusterEnded(logFile))));
	ended.catch(() => {});
	return { cluster: { bin, port, password: secrets.ownerPassword }, ended };
}

function clusterEnded(logFile) {
	return new StartFailure('PostgreSQL ended by itself.', [
		`Its log says why: ${logFile}`,
		'Then start again.'
	]);
}

async function openGiven(state, fill) {
	const { home, choice, settings } = state;
	if (choice.fresh) throw freshGiven();
	const ownerUrl = settings.databaseUrl;
	const kind = await readInstanceKind(ownerUrl);
	const variant = chooseVariant(kind, choice.variant);
	const faults = variant === 'own' ? [] : findDemoFaults(settings.given);
	if (faults.length > 0) throw badSettings(faults);
	const folder = join(home, givenFolder(ownerUrl));
	// The seed itself finds out what is there already, also after it was cut short.
	const target = { ownerUrl, folder, isNew: kind === 'blank', mayBeHalfSeeded: true };
	const said = await fill({ ...target, variant });
	return { ownerUrl, folder, variant, said, ended: new Promise(() => {}) };
}

function freshGiven() {
	return new StartFailure(
		'--fresh would drop the database of DATABASE_URL, so it works on the own cluster only.',
		['Make an empty database on that server and name it, or unset DATABASE_URL.']
	);
}
