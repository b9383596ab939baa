#!/usr/bin/env node
// Runs one of the programs that work on the database and end: `npm run verify-record`,
// `npm run replay`. They use the database of the data folder (the demo's, or with --empty or
// --rehearse another one), whether Ovalry runs or not, or the one of DATABASE_URL.
import { fileURLToPath } from 'node:url';
import { describeFailure, Interrupted } from './start/failure.mjs';
import { createProcessList } from './start/process-list.mjs';
import { runOnDatabase } from './start/run-on-database.mjs';
import { shutDown } from './start/shutdown.mjs';

const processes = createProcessList();
const checkout = fileURLToPath(new URL('..', import.meta.url)).replace(/\/$/, '');
const [name, ...words] = process.argv.slice(2);
let ending = null;

function end(code) {
	ending ??= shutDown(processes).then(() => process.exit(code));
	return ending;
}

for (const signal of ['SIGINT', 'SIGTERM', 'SIGHUP']) process.on(signal, () => void end(130));

try {
	await end(await runOnDatabase({ name, words, checkout, processes, say: console.error }));
} catch (error) {
	if (!(error instanceof Interrupted) && !ending) console.error(`\n${describeFailure(error)}`);
	await end(1);
}
