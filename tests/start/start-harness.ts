import { execFileSync, spawn, type ChildProcess } from 'node:child_process';
import {
	chmodSync,
	chownSync,
	cpSync,
	existsSync,
	mkdirSync,
	mkdtempSync,
	readdirSync,
	readFileSync,
	rmSync
} from 'node:fs';
import { tmpdir } from 'node:os';
import { dirname, join, resolve } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';

const project = resolve(import.meta.dirname, '../..');

export type Account = { uid?: number; gid?: number };
export const isRoot = process.getuid?.() === 0;

/** A copy of the project with its packages and build, as another person would have it. */
export type Checkout = { folder: string; account: Account; remove(): void };

/** @param mode permissions of the folder around it: 0o700 shuts everybody else out */
export function copyProject(account: Account, mode = 0o755): Checkout {
	const around = mkdtempSync(join(tmpdir(), 'ovalry-start-'));
	const folder = join(around, 'ovalry');
	const list = execFileSync('git', ['ls-files', '-co', '--exclude-standard', '-z'], {
		cwd: project
	});
	for (const name of list
		.toString()
		.split('\0')
		.filter((one) => one && existsSync(join(project, one)))) {
		mkdirSync(dirname(join(folder, name)), { recursive: true });
		cpSync(join(project, name), join(folder, name));
	}
	execFileSync('cp', ['-a', join(project, 'node_modules'), join(project, 'build'), folder]);
	if (account.uid !== undefined)
		execFileSync('chown', ['-R', `${account.uid}:${account.gid}`, around]);
	chmodSync(around, mode);
	return { folder, account, remove: () => rmSync(around, { recursive: true, force: true }) };
}

/** One `npm start` under way. */
export type Running = {
	child: ChildProcess;
	output(): string;
	isRunning(): boolean;
	/** Waits for words on the terminal; throws what was printed if it ends without them. */
	until(words: RegExp, timeoutMs?: number): Promise<RegExpExecArray>;
	/** Ctrl-C in its terminal: every process of the terminal's group gets the signal. */
	pressCtrlC(): void;
	/** Waits for its end; the exit code. */
	ended(timeoutMs?: number): Promise<number>;
};

export type StartOptions = { words?: string[]; environment?: Record<string, string> };

/** Types `npm start` in a checkout, as its account, in a terminal of its own. */
export function npmStart({ folder, account }: Checkout, options: StartOptions = {}): Running {
	const { words = [], environment = {} } = options;
	const home = join(dirname(folder), 'home');
	mkdirSync(home, { recursive: true });
	if (account.uid !== undefined && account.gid !== undefined)
		chownSync(home, account.uid, account.gid);
	const child = spawn('npm', ['start', '--', ...words], {
		cwd: folder,
		detached: true,
		stdio: ['ignore', 'pipe', 'pipe'],
		env: { PATH: process.env.PATH, HOME: home, ...environment },
		...account
	});
	let printed = '';
	for (const stream of [child.stdout, child.stderr])
		stream.on('data', (bytes) => (printed += String(bytes)));
	const end = new Promise<number>((done) => child.once('close', (code) => done(code ?? -1)));
	return {
		child,
		output: () => printed,
		isRunning: () => isRunning(child),
		until: (pattern, timeoutMs = 300_000) => untilPrinted(() => printed, child, pattern, timeoutMs),
		pressCtrlC: () => void process.kill(-(child.pid ?? 0), 'SIGINT'),
		ended: (timeoutMs = 60_000) =>
			within(end, timeoutMs, () => `npm start did not end:\n${printed}`)
	};
}

const isRunning = (child: ChildProcess) => child.exitCode === null && child.signalCode === null;

/** Everything runs: what the last lines say. */
export const isUp = /Stop with Ctrl-C/;

async function untilPrinted(
	read: () => string,
	child: ChildProcess,
	pattern: RegExp,
	timeoutMs: number
) {
	const deadline = Date.now() + timeoutMs;
	for (;;) {
		const found = pattern.exec(read());
		if (found) return found;
		if (!isRunning(child) || Date.now() > deadline)
			throw new Error(`${pattern} was not printed:\n${read()}`);
		await wait(20);
	}
}

function within<T>(promise: Promise<T>, ms: number, words: () => string): Promise<T> {
	const late = wait(ms, undefined, { ref: false }).then(() => Promise.reject(new Error(words())));
	return Promise.race([promise, late]);
}

/** The data folder that a start named. */
export function dataFolderOf(output: string): string {
	const found = /^ {2}Data +(\S+)$/m.exec(output)?.[1];
	if (!found) throw new Error(`no data folder in:\n${output}`);
	return found;
}

export type Seen = { pid: number; uid: number; command: string };

/** Processes whose command line names the data folder: everything a start runs from there. */
export function processesOf(dataFolder: string): Seen[] {
	return readdirSync('/proc')
		.filter((name) => /^\d+$/.test(name))
		.flatMap((name) => {
			try {
				const command = readFileSync(`/proc/${name}/cmdline`, 'utf8').replaceAll('\0', ' ').trim();
				const status = readFileSync(`/proc/${name}/status`, 'utf8');
				const uid = Number(/^Uid:\s+(\d+)/m.exec(status)?.[1]);
				return command.includes(dataFolder) ? [{ pid: Number(name), uid, command }] : [];
			} catch {
				return [];
			}
		});
}

/** How long it takes until nothing of the data folder runs any more. */
export async function msUntilGone(dataFolder: string, limitMs = 10_000): Promise<number> {
	const begun = Date.now();
	while (processesOf(dataFolder).length > 0) {
		if (Date.now() - begun > limitMs) {
			throw new Error(
				`still there: ${processesOf(dataFolder)
					.map(({ command }) => command)
					.join('\n')}`
			);
		}
		await wait(20);
	}
	return Date.now() - begun;
}
