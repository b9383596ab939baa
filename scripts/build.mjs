#!/usr/bin/env node
// Builds the web server and the processes beside it, if the source changed since the last build.
import { fileURLToPath } from 'node:url';
import { describeFailure } from './start/failure.mjs';
import { prepareCheckout } from './start/prepare.mjs';
import { createProcessList } from './start/process-list.mjs';

const checkout = fileURLToPath(new URL('..', import.meta.url)).replace(/\/$/, '');

try {
	await prepareCheckout({ checkout, processes: createProcessList(), say: console.log });
	console.log('build/ is up to date.');
} catch (error) {
	console.error(describeFailure(error));
	process.exitCode = 1;
}
