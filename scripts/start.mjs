#!/usr/bin/env node
// Starts Ovalry: installs and builds what is missing, then runs PostgreSQL, the web server, the
// worker and the local mailbox until Ctrl-C. Uses Node's own modules only: it must run before
// anything is installed.
import { fileURLToPath } from 'node:url';
import { helpText, readArguments } from './start/arguments.mjs';
import { watchCaller } from './start/caller.mjs';
import { describeFailure, Interrupted, StartFailure } from './start/failure.mjs';
import { createProcessList } from './start/process-list.mjs';
import { runOvalry } from './start/run.mjs';
import { knownSettings } from './start/settings.mjs';
import { shutDown } from './start/shutdown.mjs';

const processes = createProcessList();
const say = (line) => console.log(line);
const checkout = fileURLToPath(new URL('..', import.meta.url)).replace(/\/$/, '');
let release = () => {};
let ending = null;

/** Ends everything once; a second signal waits for the first one's work. */
function end(code) {
	ending ??= shutDown(processes).then(() => {
		release();
		process.exit(code);
	});
	return ending;
}

for (const [signal, code] of Object.entries({ SIGINT: 0, SIGTERM: 0, SIGHUP: 0 })) {
	process.on(signal, () => {
		if (!ending) say('\nStopping');
		void end(code);
	});
}

watchCaller(() => void end(0));

try {
	requireNode();
	process.umask(0o022);
	const choice = readArguments(process.argv.slice(2));
	if (choice.help) {
		say(helpText(knownSettings));
		process.exit(0);
	}
	await runOvalry({ checkout, choice, processes, say, onLock: (lock) => (release = lock.release) });
} catch (error) {
	if (!(error instanceof Interrupted) && !ending) console.error(`\n${describeFailure(error)}`);
	await end(1);
}

function requireNode() {
	const [major, minor] = process.versions.node.split('.').map(Number);
	if (major > 20 || (major === 20 && minor >= 19)) return;
	throw new StartFailure(`Ovalry needs Node 20.19 or newer; this is ${process.versions.node}.`, [
		'Install a newer Node (https://nodejs.org) and start again.'
	]);
}
