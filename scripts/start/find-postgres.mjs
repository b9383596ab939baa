import { execFileSync } from 'node:child_process';
import { existsSync, readdirSync } from 'node:fs';
import { delimiter, join } from 'node:path';

/** The oldest PostgreSQL that Ovalry is tested on. */
export const oldestMajor = 15;

/**
 * Every PostgreSQL server on this computer, newest first.
 *
 * @param {{ given?: string, path?: string, roots?: string[] }} places
 * @returns {{ major: number, bin: string }[]}
 */
export function findPostgres({ given, path = process.env.PATH ?? '', roots = debianRoots }) {
	const folders = given ? [given] : [...roots.flatMap(versionFolders), ...path.split(delimiter)];
	const found = folders
		.filter((bin) => bin && existsSync(join(bin, 'initdb')) && existsSync(join(bin, 'postgres')))
		.map((bin) => ({ bin, major: readMajor(bin) }))
		.filter(({ major }) => major !== null);
	const newest = new Map(found.toReversed().map((one) => [one.major, one]));
	return [...newest.values()].sort((a, b) => b.major - a.major);
}

/** Where Debian and its relatives keep one folder per version. */
const debianRoots = ['/usr/lib/postgresql', '/opt/homebrew/opt'];

function versionFolders(root) {
	if (!existsSync(root)) return [];
	return readdirSync(root)
		.filter((name) => /^(postgresql@)?\d+$/.test(name))
		.map((name) => join(root, name, 'bin'));
}

function readMajor(bin) {
	try {
		const words = execFileSync(join(bin, 'postgres'), ['--version'], { encoding: 'utf8' });
		return Number(/(\d+)[.\w]*/.exec(words.replace(/^[^\d]*/, ''))?.[1] ?? Number.NaN) || null;
	} catch {
		return null;
	}
}
