import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join, relative } from 'node:path';
import { lastLines } from './debian-packages.mjs';
import { diskFull, isDiskFull, StartFailure } from './failure.mjs';
import { requireSpace } from './node-packages.mjs';

const inputs = [
	'src',
	'scheduler',
	'static',
	'package-lock.json',
	'svelte.config.js',
	'tailwind.config.ts',
	'tsconfig.json',
	'vite.config.ts',
	'vite.workers.config.ts'
];

/** Digest of everything the build reads: names and contents. */
export function digestOf(checkout, paths) {
	const hash = createHash('sha256');
	for (const file of paths.flatMap((path) => listFiles(join(checkout, path))).sort()) {
		hash
			.update(`${relative(checkout, file)}\0`)
			.update(readFileSync(file))
			.update('\0');
	}
	return hash.digest('hex').slice(0, 16);
}

export const sourceDigest = (checkout) => digestOf(checkout, inputs);

/** The digest of the source that the present build was made from, null if there is no whole build. */
export function builtDigest(checkout) {
	try {
		return JSON.parse(readFileSync(stampFile(checkout), 'utf8')).source;
	} catch {
		return null;
	}
}

export const buildIsCurrent = (checkout) => builtDigest(checkout) === sourceDigest(checkout);

/** Builds the web server and the processes beside it where the source changed. */
export async function buildApplication(checkout, { processes, say }) {
	const digest = sourceDigest(checkout);
	if (builtDigest(checkout) === digest) return;
	requireSpace(checkout, 200);
	say('Building (the source changed, about half a minute)');
	rmSync(stampFile(checkout), { force: true });
	await runVite(checkout, processes, ['build']);
	await runVite(checkout, processes, ['build', '-c', 'vite.workers.config.ts']);
	writeFileSync(join(checkout, 'build/workers/engine-stamp.json'), engineStamp(checkout));
	writeFileSync(stampFile(checkout), JSON.stringify({ source: digest }));
}

/** Builds the engine's command alone, which needs the scheduler's files only. */
export async function buildEngine(checkout, { processes }) {
	const stamp = join(checkout, 'build/workers/engine-stamp.json');
	const there = existsSync(stamp) && existsSync(join(checkout, 'build/workers/engine.js'));
	if (there && readFileSync(stamp, 'utf8') === engineStamp(checkout)) return;
	rmSync(stampFile(checkout), { force: true });
	await runVite(checkout, processes, ['build', '-c', 'vite.workers.config.ts']);
	mkdirSync(join(checkout, 'build/workers'), { recursive: true });
	writeFileSync(stamp, engineStamp(checkout));
}

const engineStamp = (checkout) =>
	JSON.stringify({
		source: digestOf(checkout, ['scheduler', 'package-lock.json', 'vite.workers.config.ts'])
	});

const stampFile = (checkout) => join(checkout, 'build/stamp.json');

async function runVite(checkout, processes, words) {
	const vite = join(checkout, 'node_modules/vite/bin/vite.js');
	const environment = { ...process.env };
	delete environment.NODE_ENV;
	const options = { cwd: checkout, env: environment, name: 'build' };
	const { code, output, errors } = await processes.run(process.execPath, [vite, ...words], options);
	if (code === 0) return;
	if (isDiskFull(output + errors)) throw diskFull(checkout);
	throw new StartFailure('The build failed:', [
		...lastLines(errors || output, 30)
			.split('\n')
			.map((line) => `| ${line}`),
		'Mend the source named there, or go back to a version that builds, and start again.'
	]);
}

function listFiles(path) {
	if (!existsSync(path)) return [];
	const entries = readEntries(path);
	if (entries === null) return [path];
	return entries
		.filter((entry) => !/\.(test|bench)\.ts$/.test(entry.name))
		.flatMap((entry) => {
			const inner = join(path, entry.name);
			return entry.isDirectory() ? listFiles(inner) : [inner];
		});
}

function readEntries(path) {
	try {
		return readdirSync(path, { withFileTypes: true });
	} catch (error) {
		if (error.code === 'ENOTDIR') return null;
		throw error;
	}
}
