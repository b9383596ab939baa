import { closeSync, openSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { lastLines } from './debian-packages.mjs';
import { Interrupted, StartFailure } from './failure.mjs';

/** A service that ends this often within a minute is not started again. */
const mostRestarts = 3;

/**
 * The programs that make up a running Ovalry, each watched: one that ends by itself is started
 * again, and one that keeps ending stops everything with its last words.
 *
 * @param {{ processes: object, folder: string, account: object, logs: string, say: (line: string) => void }} context
 */
export function createServices({ processes, folder, account, logs, say }) {
	let giveUp;
	/** Rejects when a service cannot be kept running. */
	const failed = new Promise((_, reject) => (giveUp = reject));
	failed.catch(() => {});

	function start(service) {
		const ends = [];
		const launch = () => {
			const logFile = join(logs, `${service.name}.log`);
			const log = openSync(logFile, 'a', 0o600);
			const child = processes.begin(
				service.name,
				process.execPath,
				[join(folder, service.script), ...(service.words ?? [])],
				{
					cwd: folder,
					env: service.env,
					account,
					stdio: ['ignore', log, log]
				}
			);
			closeSync(log);
			child.once('exit', (code, signal) => onExit({ code, signal, logFile }));
			child.once('error', (error) => giveUp(error));
		};
		const onExit = async ({ code, signal, logFile }) => {
			if (processes.isClosing()) return;
			ends.push(Date.now());
			const recent = ends.filter((at) => Date.now() - at < 60_000).length;
			if (recent > mostRestarts || service.isReady !== true)
				return giveUp(ended(service, logFile, code, signal));
			say(`The ${service.what} ended by itself (${signal ?? `code ${code}`}); starting it again`);
			await wait(500 * recent);
			if (!processes.isClosing()) launch();
		};
		launch();
	}

	/** Starts all of them and waits until each one answers. */
	async function startAll(list) {
		for (const service of list) start(service);
		await Promise.race([
			Promise.all(list.map((service) => untilAnswers(service, { processes, logs, say }))),
			failed
		]);
		for (const service of list) service.isReady = true;
	}

	return { startAll, failed };
}

function ended(service, logFile, code, signal) {
	const words = lastLines(readFileSync(logFile, 'utf8'), 15);
	return new StartFailure(
		`The ${service.what} ended by itself (${signal ?? `code ${code}`}). Its last words:`,
		[...words.split('\n').map((line) => `| ${line}`), `The full log: ${logFile}`]
	);
}

async function untilAnswers(service, { processes, logs, say }) {
	if (!service.probe) return;
	const logFile = join(logs, `${service.name}.log`);
	let until = Date.now() + 60_000;
	let fault = null;
	while (Date.now() < until) {
		if (processes.isClosing()) throw new Interrupted();
		const status = await statusOf(service.probe);
		if (status !== null && status < 500) return;
		// It listens but fails: a little longer, then a person should know, who can use the rest.
		if (status !== null && fault === null) until = Date.now() + 3_000;
		fault ??= status;
		await wait(50);
	}
	if (fault !== null)
		return say(`The ${service.what} answers with a fault (${fault}); see ${logFile}`);
	throw new StartFailure(`The ${service.what} does not answer at ${service.probe}.`, [
		...lastLines(readFileSync(logFile, 'utf8'), 3)
			.split('\n')
			.map((line) => `| ${line}`),
		`The full log: ${logFile}`
	]);
}

async function statusOf(url) {
	try {
		const reply = await fetch(url, { redirect: 'manual', signal: AbortSignal.timeout(5_000) });
		await reply.arrayBuffer();
		return reply.status;
	} catch {
		return null;
	}
}
