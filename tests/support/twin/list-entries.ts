import { readdirSync, readFileSync } from 'node:fs';
import { join, relative, resolve } from 'node:path';
import { permissions, type Permission } from '$lib/server/access/permissions';

const routes = resolve(import.meta.dirname, '../../../src/routes');

/** One address that can be asked with GET. */
export type Entry = {
	/** Such as `studies/[studyId]/people`. */
	path: string;
	kind: 'page' | 'endpoint';
	/** What its first line asks for; `link` for a participant's link, null where anybody may ask. */
	guard: Permission | 'link' | null;
	/** Names in the path that stand for a value. */
	params: string[];
};

/** Every entry of the routes on disk, in order of their addresses. */
export function listEntries(): Entry[] {
	const files = readdirSync(routes, { recursive: true, encoding: 'utf8' });
	const entries = files.flatMap((file) => readEntry(join(routes, file)) ?? []);
	return entries.sort((a, b) => a.path.localeCompare(b.path) || a.kind.localeCompare(b.kind));
}

function readEntry(file: string): Entry | null {
	const name = file.slice(file.lastIndexOf('/') + 1);
	if (name !== '+page.svelte' && name !== '+server.ts') return null;
	const source = readFileSync(name === '+page.svelte' ? serverHalf(file) : file, 'utf8');
	if (name === '+server.ts' && !/export (const|async function|function) GET\b/.test(source))
		return null;
	const folder = relative(routes, file.slice(0, file.lastIndexOf('/')));
	const parts = folder.split('/').filter((part) => part !== '' && !part.startsWith('('));
	return {
		path: parts.join('/'),
		kind: name === '+page.svelte' ? 'page' : 'endpoint',
		guard: readGuard(source),
		params: parts.flatMap((part) => /^\[(\w+)\]$/.exec(part)?.[1] ?? [])
	};
}

function serverHalf(page: string): string {
	const file = page.replace(/\.svelte$/, '.server.ts');
	try {
		readFileSync(file);
		return file;
	} catch {
		return page;
	}
}

/** The guard of the load or GET: the first one in the file, before any action. */
function readGuard(source: string): Entry['guard'] {
	const [readingHalf = ''] = source.split(/export const actions\b/);
	if (/requireAnswerLink\(/.test(readingHalf)) return 'link';
	const named = /requirePermission\(\s*[\w.]+,\s*'([a-z:-]+)'/.exec(readingHalf)?.[1];
	if (named === undefined) return null;
	if (named in permissions) return named as Permission;
	throw new RangeError(`${named} is not in the permission table`);
}
