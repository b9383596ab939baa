#!/usr/bin/env node
// Runs the benchmarks in tests/bench, one after another, and prints what they print. Times depend
// on the computer: compare ratios, not seconds.
import { existsSync, readdirSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { describeFailure } from './start/failure.mjs';
import { prepareCheckout } from './start/prepare.mjs';
import { createProcessList } from './start/process-list.mjs';
import { shutDown } from './start/shutdown.mjs';
import { openThrowawayCluster } from './start/throwaway-cluster.mjs';

const checkout = fileURLToPath(new URL('..', import.meta.url)).replace(/\/$/, '');
const folder = join(checkout, 'tests/bench');
const names = existsSync(folder)
	? readdirSync(folder).filter((name) => name.endsWith('.bench.ts'))
	: [];

/** Benchmarks that drive the built application in a browser; the others need the sources only. */
const onTheApplication = ['draft-editor.bench.ts'];

try {
	if (names.length === 0) console.log('There are no benchmarks yet (tests/bench/*.bench.ts).');
	else process.exitCode = await runBenchmarks();
} catch (error) {
	console.error(describeFailure(error));
	process.exitCode = 1;
}

async function runBenchmarks() {
	const processes = createProcessList();
	const asked = process.argv.slice(2);
	const files = asked.length > 0 ? asked : names.map((name) => join('tests/bench', name));
	const isDriven = (file) => onTheApplication.some((name) => file.endsWith(name));
	const driven = files.filter(isDriven);
	const plain = files.filter((file) => !isDriven(file));
	const build = driven.length > 0 ? 'application' : 'nothing';
	await prepareCheckout({ checkout, processes, say: console.log }, { build });
	const codes = [];
	if (plain.length > 0) codes.push(await runVitest(processes, ['unit', plain], process.env));
	if (driven.length > 0) {
		const cluster = await openThrowawayCluster({ processes, say: console.log });
		const env = { ...process.env, OVALRY_TEST_CLUSTER: cluster.url };
		codes.push(await runVitest(processes, ['e2e', driven], env));
		await shutDown(processes);
		cluster.remove();
	}
	return Math.max(...codes);
}

function runVitest(processes, [project, files], env) {
	const vitest = join(checkout, 'node_modules/vitest/vitest.mjs');
	const words = [vitest, 'bench', '--run', '--project', project, ...files];
	const child = processes.begin('bench', process.execPath, words, {
		cwd: checkout,
		env,
		stdio: ['ignore', 'inherit', 'inherit']
	});
	return new Promise((done) => child.once('exit', (code) => done(code ?? 1)));
}
