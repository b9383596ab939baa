import { existsSync, mkdirSync } from 'node:fs';
import { join } from 'node:path';
import { chooseAccounts } from './accounts.mjs';
import { readArguments } from './arguments.mjs';
import { readServerPort } from './cluster.mjs';
import { databaseNames, givenFolder } from './databases.mjs';
import { applicationEnvironment, urlForRole } from './environment.mjs';
import { StartFailure } from './failure.mjs';
import { findPostgres } from './find-postgres.mjs';
import { makeHome } from './folders.mjs';
import { readInstanceKind } from './instance-kind.mjs';
import { takeLock } from './lock.mjs';
import { openCluster } from './open-database.mjs';
import { requirePostgres } from './open-home.mjs';
import { prepareCheckout } from './prepare.mjs';
import { clusterUrl, runSql } from './run-sql.mjs';
import { readSecrets } from './secrets.mjs';
import { readSettings } from './settings.mjs';

const options = ['--demo', '--empty', '--rehearse'];

/**
 * Runs one worker program to its end, with the environment the application has, on the database of
 * the data folder or of DATABASE_URL. A cluster that does not run is started for that time only.
 *
 * @returns {Promise<number>} the program's exit code
 */
export async function runOnDatabase({ name, words, checkout, processes, say }) {
	const { variant } = readArguments(words.filter((word) => options.includes(word)));
	const settings = readSettings(process.env, checkout, variant);
	await prepareCheckout({ checkout, processes, say });
	const target = settings.databaseUrl
		? await openGiven({ settings, variant, say })
		: await openOwn({ settings, variant: variant ?? 'demo', processes, say });
	const env = environmentOf(target, settings);
	const rest = words.filter((word) => !options.includes(word));
	const script = join(checkout, `build/workers/${name}.js`);
	if (!existsSync(script))
		throw new StartFailure(`There is no program ${name}.`, 'Try verify-record or replay.');
	const child = processes.begin(name, process.execPath, [script, ...rest], {
		cwd: process.cwd(),
		env,
		stdio: ['inherit', 'inherit', 'inherit']
	});
	return new Promise((done) => child.once('exit', (code) => done(code ?? 1)));
}

function environmentOf({ ownerUrl, secrets, folder, variant }, settings) {
	return applicationEnvironment({
		mode: variant === 'own' ? 'own' : 'demo',
		settings,
		secrets,
		appUrl: urlForRole(ownerUrl, 'ovalry_app', secrets.appPassword),
		keys: join(folder, 'keys'),
		// Neither program sends mail; the settings ask for a way to do it all the same.
		mailbox: settings.given.SMTP_HOST ? undefined : { smtpPort: 1, url: 'http://localhost:1' }
	});
}

async function openGiven({ settings, variant, say }) {
	const isRoot = process.getuid?.() === 0;
	const home = makeHome(settings.dataFolder, chooseAccounts({ isRoot, say, needsDatabase: false }));
	const ownerUrl = settings.databaseUrl;
	const kind = await readInstanceKind(ownerUrl);
	return {
		ownerUrl,
		secrets: readSecrets(home),
		folder: join(home, givenFolder(ownerUrl)),
		variant: kind === 'blank' ? (variant ?? 'own') : kind
	};
}

async function openOwn({ settings, variant, processes, say }) {
	const isRoot = process.getuid?.() === 0;
	await requirePostgres({ settings, processes, say, isRoot });
	const accounts = chooseAccounts({ isRoot, say, needsDatabase: true });
	const home = makeHome(settings.dataFolder, accounts);
	if (!existsSync(join(home, 'cluster'))) throw noDatabase(home, variant);
	const secrets = readSecrets(home);
	const port = await portOfCluster({ home, accounts, secrets, settings, processes, say });
	const database = databaseNames[variant];
	await requireDatabase({ settings, port, secrets, database, processes, home, variant });
	const ownerUrl = clusterUrl({ port, password: secrets.ownerPassword, database });
	return { ownerUrl, secrets, folder: join(home, variant), variant };
}

/** The running Ovalry's cluster, or the same one started for a moment. */
async function portOfCluster({ home, accounts, secrets, settings, processes, say }) {
	const lock = takeLock(join(home, 'lock'), { address: 'a check of the database' });
	if (!lock.held) return readServerPort(join(home, 'cluster'));
	process.once('exit', lock.release);
	const logs = join(home, 'logs');
	mkdirSync(logs, { recursive: true });
	processes.noteIn(join(home, 'running.json'));
	const { cluster } = await openCluster({
		home,
		accounts,
		logs,
		secrets,
		settings,
		processes,
		say
	});
	return cluster.port;
}

async function requireDatabase({ settings, port, secrets, database, processes, home, variant }) {
	const { bin } = findPostgres({ given: settings.postgresBin })[0];
	const access = { bin, port, password: secrets.ownerPassword, processes };
	const sql = `select 1 from pg_database where datname = '${database}'`;
	if ((await runSql(access, sql)) !== '1') throw noDatabase(home, variant);
}

function noDatabase(home, variant) {
	const starts = {
		demo: 'npm start',
		rehearsal: 'npm start -- --rehearse',
		own: 'npm start -- --empty'
	};
	return new StartFailure(`There is no database of that kind in ${home}.`, [
		`${starts[variant]} makes it. Other databases there: --demo, --empty, --rehearse`
	]);
}
