#!/usr/bin/env node
// Compares a fresh random sample of inputs with R, where R is installed. `--seed 7` repeats a sample.
// Without R nothing is compared: that is said, and is no failure, as R is not needed for Ovalry.
import { spawnSync } from 'node:child_process';
import { sampleCases } from './test-r/sample-cases.mjs';

const place = process.argv.indexOf('--seed');
const seed = place > 0 ? Number(process.argv[place + 1]) : Date.now() % 2 ** 31;
const installed = spawnSync('Rscript', ['--version']).status === 0;

if (!installed) {
	console.log(
		'R is not installed here, so nothing was compared with it. With R (Debian: r-base-core,'
	);
	console.log(
		'and r-cran-lme4 for mixed models) this command checks the engine on fresh random inputs.'
	);
} else process.exitCode = await compare();

async function compare() {
	const cases = await sampleCases(seed);
	const answers = askR(cases);
	const verdicts = cases.map((wanted, i) => judge(wanted, answers.get(i)));
	const of = (verdict) => verdicts.filter((own) => own === verdict).length;
	cases.forEach(({ expression, value }, i) => {
		if (verdicts[i] !== 'differs') return;
		console.log(`differs: ${expression.slice(0, 300)}\n  R ${answers.get(i)}, engine ${value}`);
	});
	console.log(
		`Seed ${seed}: ${of('same')} of ${cases.length} the same, ${of('differs')} differ, ${of('skipped')} need R packages that are not installed.`
	);
	return of('differs') === 0 && of('same') > 0 ? 0 : 1;
}

/** Values by the number of the case; a case whose package is missing has none. */
function askR(cases) {
	const lines = cases.map(({ expression, needs }, i) => {
		const guard = needs ? `requireNamespace("${needs}", quietly = TRUE)` : 'TRUE';
		const attach = needs ? `suppressPackageStartupMessages(library(${needs})); ` : '';
		return `if (${guard}) { ${attach}tell(${i}, ${expression}) }`;
	});
	const script = [
		'options(digits = 17, warn = -1)',
		'tell <- function(i, value) cat(sprintf("%d %.17g\\n", i, as.numeric(value)))',
		...lines
	].join('\n');
	const run = spawnSync('Rscript', ['-'], { input: script, encoding: 'utf8', maxBuffer: 2 ** 26 });
	if (run.status !== 0) throw new Error(`R stopped: ${run.stderr.slice(-2000)}`);
	const pairs = run.stdout.split('\n').map((line) => /^(\d+) (\S+)$/.exec(line.trim()));
	return new Map(pairs.flatMap((match) => (match ? [[Number(match[1]), Number(match[2])]] : [])));
}

/** `above`: the engine's value may lie so far above R's, a criterion that is to be least. */
function judge({ value, tolerance, needs }, answer) {
	if (answer === undefined) return needs ? 'skipped' : 'differs';
	const { abs = 0, rel = 0, above = Infinity } = tolerance;
	const near = Math.abs(value - answer) <= Math.max(abs, rel * Math.abs(answer));
	return near && value - answer <= above ? 'same' : 'differs';
}
