import { chownSync, closeSync, existsSync, mkdirSync, openSync, readFileSync } from 'node:fs';
import { renameSync, rmSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { lastLines } from './debian-packages.mjs';
import { diskFull, Interrupted, isDiskFull, StartFailure } from './failure.mjs';
import { requireSpace } from './node-packages.mjs';
import { freePort } from './ports.mjs';
import { ownerRole } from './run-sql.mjs';

/**
 * Makes a cluster. One that was cut short stays behind under another name and is made anew.
 *
 * @param {{ bin: string, folder: string, account: object, password: string, processes: object, durable?: boolean }} plan
 */
export async function createCluster({ bin, folder, account, password, processes, durable = true }) {
	if (existsSync(join(folder, 'PG_VERSION'))) return;
	requireSpace(dirname(folder), 150);
	const young = `${folder}.new`;
	rmSync(young, { recursive: true, force: true });
	mkdirSync(young, { mode: 0o700 });
	if (account.uid !== undefined) chownSync(young, account.uid, account.gid);
	const words = [
		'-D',
		young,
		'-U',
		ownerRole,
		'-A',
		'scram-sha-256',
		'-E',
		'UTF8',
		'--no-instructions'
	];
	const locale = process.platform === 'linux' ? '--locale=C.UTF-8' : '--no-locale';
	const passwordFile = writePassword(`${folder}.password`, password, account);
	const { code, output, errors } = await processes.run(
		join(bin, 'initdb'),
		[...words, locale, `--pwfile=${passwordFile}`, ...(durable ? [] : ['--no-sync'])],
		{ account, name: 'initdb' }
	);
	rmSync(passwordFile);
	if (code !== 0 && isDiskFull(output + errors)) throw diskFull(dirname(folder));
	if (code !== 0) throw cannotCreate(young, errors || output);
	renameSync(young, folder);
}

function writePassword(file, password, account) {
	rmSync(file, { force: true });
	writeFileSync(file, `${password}\n`, { mode: 0o600 });
	if (account.uid !== undefined) chownSync(file, account.uid, account.gid);
	return file;
}

function cannotCreate(folder, why) {
	return new StartFailure(`PostgreSQL could not make its data folder ${folder}.`, [
		...lastLines(why)
			.split('\n')
			.map((line) => `| ${line}`),
		'Mend that, or choose another folder with OVALRY_DATA, and start again.'
	]);
}

/**
 * Starts the cluster's server on a free loopback port and waits until it takes connections.
 *
 * @returns {Promise<{ port: number, child: import('node:child_process').ChildProcess }>}
 */
export async function startCluster({
	bin,
	folder,
	account,
	processes,
	logFile,
	say,
	options = []
}) {
	const port = await freePort();
	const words = ['-D', folder, '-p', String(port), ...clusterOptions, ...options].flatMap(
		(one) => one
	);
	const log = openSync(logFile, 'w', 0o600);
	const child = processes.begin('postgres', join(bin, 'postgres'), words, {
		account,
		stdio: ['ignore', log, log]
	});
	closeSync(log);
	await untilReady({ child, folder, logFile, processes, say });
	return { port, child };
}

const clusterOptions = [
	'listen_addresses=127.0.0.1',
	'unix_socket_directories=',
	'timezone=UTC',
	'log_timezone=UTC',
	'max_connections=100'
].flatMap((setting) => ['-c', setting]);

async function untilReady({ child, folder, logFile, processes, say }) {
	const begun = Date.now();
	let said = false;
	while (!isReady(folder, child.pid)) {
		if (processes.isClosing()) throw new Interrupted();
		if (child.exitCode !== null || child.signalCode !== null) throw cannotStart(folder, logFile);
		if (!said && Date.now() - begun > 10_000) {
			say('PostgreSQL repairs its files after a sudden stop; this can take a few minutes');
			said = true;
		}
		await wait(20);
	}
}

/** The server writes "ready" into its pid file once it takes connections. */
function isReady(folder, pid) {
	const lines = readPidFile(folder);
	return lines?.[0] === String(pid) && lines[7]?.trim() === 'ready';
}

/** Port of the server that runs on a folder, from its pid file. */
export function readServerPort(folder) {
	return Number(readPidFile(folder)?.[3]);
}

function readPidFile(folder) {
	try {
		return readFileSync(join(folder, 'postmaster.pid'), 'utf8').split('\n');
	} catch {
		return null;
	}
}

function cannotStart(folder, logFile) {
	const log = readFileSync(logFile, 'utf8');
	if (isDiskFull(log)) return diskFull(dirname(folder));
	return new StartFailure(`PostgreSQL did not start from ${folder}.`, [
		...lastLines(log)
			.split('\n')
			.map((line) => `| ${line}`),
		`Mend that and start again. The full log: ${logFile}`
	]);
}

/**
 * Ends a server that an earlier start left behind when it was killed.
 *
 * @returns {Promise<boolean>} whether there was one
 */
export async function stopLeftover({ folder, isSameServer }) {
	const pid = Number(readPidFile(folder)?.[0]);
	if (!pid || !isSameServer(pid, folder)) return false;
	for (const signal of ['SIGINT', 'SIGQUIT']) {
		process.kill(pid, signal);
		for (let tries = 0; tries < 250; tries++) {
			if (!isSameServer(pid, folder)) return true;
			await wait(20);
		}
	}
	throw new StartFailure(
		`A PostgreSQL left behind by an earlier start (process ${pid}) does not end.`,
		[`End it: kill -QUIT ${pid}`]
	);
}

/** Is this process a PostgreSQL server on that folder? Looks at its command line. */
export function runsOn(pid, folder) {
	try {
		const words = readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0');
		return /postgres$/.test(words[0] ?? '') && words.includes(folder);
	} catch {
		return false;
	}
}
