import { mkdirSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { countReport } from './count.mjs';
import { tierOf } from './plan.mjs';

/**
 * Runs one tier and counts it; what the runner prints goes to the terminal as it comes.
 *
 * @param {string} tier
 * @param {{ checkout: string, processes: object, env: object, files: string[], rest: string[] }} context
 */
export function runTier(tier, context) {
	return tier === 'types' ? checkTypes(context) : runVitest(tier, context);
}

async function runVitest(tier, { checkout, processes, env, files, rest }) {
	const report = join(checkout, 'test-results', `${tier}.json`);
	mkdirSync(join(checkout, 'test-results'), { recursive: true });
	rmSync(report, { force: true });
	const code = await show(processes, checkout, env, [
		'node_modules/vitest/vitest.mjs',
		'run',
		'--project',
		tier,
		'--reporter=default',
		'--reporter=json',
		`--outputFile.json=${report}`,
		'--passWithNoTests',
		...files.filter((file) => tierOf(file) === tier),
		...rest
	]);
	return countReport(report, code);
}

/** The engine's fence (no browser, no Node in `scheduler/`) and the types of everything else. */
async function checkTypes({ checkout, processes, env }) {
	const svelteKit = 'node_modules/@sveltejs/kit/svelte-kit.js';
	await show(processes, checkout, env, [svelteKit, 'sync']);
	const checks = [
		['node_modules/typescript/bin/tsc', '-p', 'scheduler/tsconfig.json'],
		[
			'node_modules/svelte-check/bin/svelte-check',
			'--tsconfig',
			'./tsconfig.json',
			'--threshold',
			'error'
		]
	];
	const counts = { passed: 0, failed: 0, skipped: 0 };
	for (const words of checks) {
		const code = await show(processes, checkout, env, words);
		counts[code === 0 ? 'passed' : 'failed'] += 1;
	}
	return counts;
}

/** Runs a Node program with its output on the terminal. */
function show(processes, cwd, env, words) {
	return new Promise((done, fail) => {
		const stdio = ['ignore', 'inherit', 'inherit'];
		const child = processes.begin('tests', process.execPath, words, { cwd, env, stdio });
		child.once('error', fail);
		child.once('exit', (code) => done(code ?? 1));
	});
}
