import { spawn } from 'node:child_process';
import { writeFileSync } from 'node:fs';
import { Interrupted, StartFailure } from './failure.mjs';
import { processStart } from './process-start.mjs';

/**
 * Everything this start has begun, so that all of it, and nothing else, can be ended. Each program
 * runs in a process group of its own: Ctrl-C in the terminal reaches this script alone, which then
 * ends the others in order.
 */
export function createProcessList() {
	const running = new Map();
	let closing = false;
	let file = null;

	function begin(name, command, words, options = {}) {
		if (closing) throw new Interrupted();
		const child = spawn(command, words, {
			cwd: options.cwd ?? '/',
			env: options.env ?? process.env,
			stdio: options.stdio ?? ['ignore', 'pipe', 'pipe'],
			detached: true,
			...options.account
		});
		running.set(child, { name, startedAt: null });
		child.once('error', () => forget(child));
		child.once('exit', () => forget(child));
		note();
		return child;
	}

	function forget(child) {
		running.delete(child);
		note();
	}

	/** Keeps the list on disk: a start that was killed is cleaned up by the next one. */
	function note() {
		if (!file) return;
		const entries = [...running].map(([child, { name }]) => ({
			name,
			pid: child.pid,
			startedAt: processStart(child.pid)
		}));
		writeFileSync(file, JSON.stringify(entries), { mode: 0o600 });
	}

	/** Runs a program to its end. @returns {Promise<{ code: number, output: string, errors: string }>} */
	function run(command, words, options = {}) {
		return new Promise((done, fail) => {
			const child = begin(options.name ?? command, command, words, {
				...options,
				stdio: [options.input === undefined ? 'ignore' : 'pipe', 'pipe', 'pipe']
			});
			let output = '';
			let errors = '';
			child.stdout.on('data', (bytes) => (output += bytes));
			child.stderr.on('data', (bytes) => {
				errors += bytes;
				options.onErrors?.(String(bytes));
			});
			child.once('error', (error) => fail(cannotRun(command, error)));
			child.once('close', (code) => {
				if (closing) fail(new Interrupted());
				else done({ code: code ?? 1, output, errors });
			});
			if (options.input !== undefined) child.stdin.end(options.input);
		});
	}

	function signalAll(signal, names) {
		for (const [child, { name }] of running) {
			if (!names || names.includes(name)) signalGroup(child.pid, signal);
		}
	}

	return {
		begin,
		run,
		signalAll,
		noteIn: (path) => ((file = path), note()),
		close: () => (closing = true),
		isClosing: () => closing,
		names: () => [...running.values()].map(({ name }) => name)
	};
}

/** Sends a signal to a program and whatever it started itself. */
export function signalGroup(pid, signal) {
	if (!pid) return;
	try {
		process.kill(-pid, signal);
	} catch (error) {
		if (error.code !== 'ESRCH') throw error;
	}
}

function cannotRun(command, error) {
	if (error.code !== 'ENOENT') return error;
	return new StartFailure(
		`The program ${command} is missing.`,
		`Install ${command}, then start again.`
	);
}
