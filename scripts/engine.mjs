#!/usr/bin/env node
// The engine as a command: JSON on standard input, JSON on standard output, nothing else printed.
import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describeFailure } from './start/failure.mjs';
import { prepareCheckout } from './start/prepare.mjs';
import { createProcessList } from './start/process-list.mjs';

const checkout = fileURLToPath(new URL('..', import.meta.url)).replace(/\/$/, '');
// What has to be said while it is built goes where it does not mix with the answer.
const context = { checkout, processes: createProcessList(), say: console.error };

try {
	await prepareCheckout(context, { build: 'engine' });
	const engine = join(checkout, 'build/workers/engine.js');
	const child = spawn(process.execPath, [engine, ...process.argv.slice(2)], { stdio: 'inherit' });
	for (const signal of ['SIGINT', 'SIGTERM']) process.on(signal, () => child.kill(signal));
	child.once('exit', (code) => (process.exitCode = code ?? 1));
} catch (error) {
	console.error(describeFailure(error));
	process.exitCode = 1;
}
