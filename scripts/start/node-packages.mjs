import { existsSync, readFileSync, rmSync, statfsSync } from 'node:fs';
import { basename, join } from 'node:path';
import { findProgram, lastLines } from './debian-packages.mjs';
import { diskFull, isDiskFull, StartFailure } from './failure.mjs';

/**
 * Does npm's own note of what it installed agree with the lock file? An install that was cut short
 * leaves no note, and one made by hand counts too.
 *
 * @param {string} checkout
 */
export function packagesAreCurrent(checkout) {
	const wanted = readPackages(join(checkout, 'package-lock.json'));
	const there = readPackages(join(checkout, 'node_modules/.package-lock.json'));
	if (!wanted || !there) return false;
	const required = Object.entries(wanted).filter(([path, one]) => path && !one.optional);
	return (
		required.every(([path]) => path in there) &&
		Object.entries(there).every(([path, one]) => wanted[path]?.version === one.version)
	);
}

/** Runs `npm ci` where it is needed. */
export async function installPackages(checkout, { processes, say }) {
	if (packagesAreCurrent(checkout)) return;
	requireSpace(checkout, 1_200);
	say('Installing the Node packages (once, about a minute)');
	const [command, ...first] = findNpm();
	// A production setting from outside would leave out what the build needs.
	const words = [...first, 'ci', '--include=dev', '--no-audit', '--no-fund'];
	const { code, output, errors } = await processes.run(command, words, {
		cwd: checkout,
		name: 'npm'
	});
	if (code === 0) return;
	// Whatever is there now is not whole.
	rmSync(join(checkout, 'node_modules/.package-lock.json'), { force: true });
	if (isDiskFull(output + errors)) throw diskFull(checkout);
	throw new StartFailure('npm ci could not install the Node packages.', [
		...lastLines(errors || output)
			.split('\n')
			.map((line) => `| ${line}`),
		'Ovalry needs npm and its registry for the first start. Check the connection (or the proxy and',
		`registry settings of npm) and that you may write in ${checkout}, then start again.`
	]);
}

/** npm as it was called, or the one on the search path. */
function findNpm() {
	const called = process.env.npm_execpath;
	if (called && basename(called) === 'npm-cli.js' && existsSync(called))
		return [process.execPath, called];
	const found = findProgram('npm');
	if (found) return [found];
	throw new StartFailure('npm is missing.', 'Install it with Node, then type: npm start');
}

/** @param {number} needMb how many megabytes the step ahead takes */
export function requireSpace(folder, needMb) {
	const { bavail, bsize } = statfsSync(folder);
	if ((bavail * bsize) / 1e6 < needMb) throw diskFull(folder);
}

function readPackages(file) {
	try {
		return JSON.parse(readFileSync(file, 'utf8')).packages;
	} catch {
		return null;
	}
}
