#!/usr/bin/env node
// Runs the benchmarks in tests/bench, one after another, and prints what they print. Times depend
// on the computer: compare ratios, not seconds.
import { existsSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describeFailure } from './start/failure.mjs';
import { prepareCheckout } from './start/prepare.mjs';
import { createProcessList } from './start/process-list.mjs';

const checkout = fileURLToPath(new URL('..', import.meta.url)).replace(/\/$/, '');
const folder = join(checkout, 'tests/bench');
const names = existsSync(folder)
	? readdirSync(folder).filter((name) => name.endsWith('.bench.ts'))
	: [];

try {
	if (names.length === 0) console.log('There are no benchmarks yet (tests/bench/*.bench.ts).');
	else process.exitCode = await runBenchmarks();
} catch (error) {
	console.error(describeFailure(error));
	process.exitCode = 1;
}

async function runBenchmarks() {
	const processes = createProcessList();
	await prepareCheckout({ checkout, processes, say: console.log }, { build: 'nothing' });
	const vitest = join(checkout, 'node_modules/vitest/vitest.mjs');
	const files =
		process.argv.slice(2).length > 0
			? process.argv.slice(2)
			: names.map((name) => join('tests/bench', name));
	const words = [vitest, 'bench', '--run', '--project', 'unit', ...files];
	const child = processes.begin('bench', process.execPath, words, {
		cwd: checkout,
		stdio: ['ignore', 'inherit', 'inherit']
	});
	return new Promise((done) => child.once('exit', (code) => done(code ?? 1)));
}
