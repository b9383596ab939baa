import {
	existsSync,
	mkdirSync,
	readdirSync,
	readFileSync,
	rmSync,
	symlinkSync,
	writeFileSync
} from 'node:fs';
import { join } from 'node:path';
import { canReach } from './accounts.mjs';
import { builtDigest, digestOf } from './build.mjs';
import { diskFull, isDiskFull } from './failure.mjs';
import { requireSpace } from './node-packages.mjs';

/**
 * Puts the built application where it runs from: a folder of its own below the data folder, so that
 * a later build in the checkout does not pull files from under a running server. The packages are
 * linked where the application's account can read them, else copied (a checkout in root's home).
 * A second start finds everything in place.
 *
 * @returns {Promise<string>} the folder to run from
 */
export async function stageApplication({ checkout, home, account, processes, say }) {
	const packages = join(checkout, 'node_modules');
	const copies = !canReach(join(packages, 'postgres/package.json'), account);
	const id = `${builtDigest(checkout)}-${digestOf(checkout, ['drizzle', 'package-lock.json'])}`;
	const folder = join(home, 'app', copies ? `${id}-whole` : id);
	if (existsSync(join(folder, 'ready'))) return folder;
	requireSpace(home, copies ? 600 : 60);
	rmSync(join(home, 'app'), { recursive: true, force: true });
	mkdirSync(folder, { recursive: true });
	await copy(
		processes,
		['build', 'drizzle', 'package.json'].map((name) => join(checkout, name)),
		folder
	);
	if (copies) {
		say('Copying the application to where its account can read it');
		await copyPackages(checkout, folder, processes);
	} else {
		symlinkSync(packages, join(folder, 'node_modules'));
	}
	await openForReading(processes, folder, copies);
	writeFileSync(join(folder, 'ready'), '');
	return folder;
}

/** Copies what the application needs when it runs, not what builds it. */
async function copyPackages(checkout, folder, processes) {
	const target = join(folder, 'node_modules');
	const names = runtimePackages(checkout).filter((name) =>
		existsSync(join(checkout, 'node_modules', name))
	);
	const scopes = new Set(names.map((name) => (name.startsWith('@') ? name.split('/')[0] : '')));
	for (const scope of scopes) {
		const into = join(target, scope);
		mkdirSync(into, { recursive: true });
		const own = names.filter((name) => (name.startsWith('@') ? name.split('/')[0] : '') === scope);
		await copy(
			processes,
			own.map((name) => join(checkout, 'node_modules', name)),
			into
		);
	}
}

/** Packages on the first level that the lock file does not mark as needed for development only. */
export function runtimePackages(checkout) {
	const { packages } = JSON.parse(readFileSync(join(checkout, 'package-lock.json'), 'utf8'));
	return Object.entries(packages)
		.filter(([path, one]) => path.startsWith('node_modules/') && !one.dev && !one.devOptional)
		.map(([path]) => path.slice('node_modules/'.length))
		.filter((name) => !name.includes('/node_modules/'));
}

async function copy(processes, sources, target) {
	const there = sources.filter((source) => existsSync(source));
	const { code, errors } = await processes.run('cp', ['-R', ...there, target], { name: 'cp' });
	if (code !== 0 && isDiskFull(errors)) throw diskFull(target);
	if (code !== 0) throw new Error(`cp: ${errors.trim()}`);
}

async function openForReading(processes, folder, copies) {
	// The link to the checkout's packages stays out of it: chmod would follow it.
	const own = readdirSync(folder).filter((name) => copies || name !== 'node_modules');
	const targets = own.map((name) => join(folder, name));
	const { code, errors } = await processes.run('chmod', ['-R', 'a+rX', ...targets], {
		name: 'chmod'
	});
	if (code !== 0) throw new Error(`chmod: ${errors.trim()}`);
}
