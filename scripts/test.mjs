#!/usr/bin/env node
// Runs the quick tier of tests, or the part of it that is named. Uses Node's own modules only: it
// must run before anything is installed.
import { fileURLToPath } from 'node:url';
import { watchCaller } from './start/caller.mjs';
import { describeFailure, Interrupted } from './start/failure.mjs';
import { prepareCheckout } from './start/prepare.mjs';
import { createProcessList } from './start/process-list.mjs';
import { shutDown } from './start/shutdown.mjs';
import { openThrowawayCluster } from './start/throwaway-cluster.mjs';
import { addUp, countWords } from './test/count.mjs';
import { needsBuild, needsCluster, requireTestPackages } from './test/needs.mjs';
import { planTests } from './test/plan.mjs';
import { runTier } from './test/run-tier.mjs';

const processes = createProcessList();
const say = (line) => console.log(line);
const checkout = fileURLToPath(new URL('..', import.meta.url)).replace(/\/$/, '');
const begun = Date.now();
let cluster = null;
let ending = null;

function end(code) {
	ending ??= shutDown(processes).then(() => {
		cluster?.remove();
		process.exit(code);
	});
	return ending;
}

for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => void end(130));

watchCaller(() => void end(130));

try {
	process.umask(0o022);
	const { tiers, files, rest } = planTests(process.argv.slice(2), checkout);
	const isRoot = process.getuid?.() === 0;
	await requireTestPackages(tiers, { processes, say, isRoot });
	await prepareCheckout(
		{ checkout, processes, say },
		{ build: needsBuild(tiers) ? 'application' : 'nothing' }
	);
	if (needsCluster(tiers)) cluster = await openThrowawayCluster({ processes, say });
	const env = { ...process.env, ...(cluster && { OVALRY_TEST_CLUSTER: cluster.url }) };
	const counts = [];
	for (const tier of tiers)
		counts.push(await runOne(tier, { checkout, processes, env, files, rest }));
	await shutDown(processes);
	cluster?.remove();
	const sum = addUp(counts.map((one) => one.counts));
	say('');
	for (const { tier, counts: own, seconds } of counts) {
		say(`${tier.padEnd(14)}${countWords(own)} (${seconds} s)`);
	}
	say(`${'in all'.padEnd(14)}${secondsSince(begun)} s`);
	say(countWords(sum));
	process.exitCode = sum.failed > 0 || sum.passed === 0 ? 1 : 0;
} catch (error) {
	if (!(error instanceof Interrupted) && !ending) console.error(`\n${describeFailure(error)}`);
	if (!ending) say('0 passed, 1 failed');
	await end(1);
}

async function runOne(tier, context) {
	say(`\n== ${tier}`);
	const start = Date.now();
	return { tier, counts: await runTier(tier, context), seconds: secondsSince(start) };
}

function secondsSince(start) {
	return Math.round((Date.now() - start) / 1000);
}
