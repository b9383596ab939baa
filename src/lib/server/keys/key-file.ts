import { randomUUID } from 'node:crypto';
import { link, mkdir, open, readFile, rm } from 'node:fs/promises';
import { dirname } from 'node:path';

/**
 * Writes a new file that is whole or absent, readable by its owner only, and never replaces one.
 *
 * Method: a synced temporary file is linked to its name; two writers cannot both succeed.
 * @returns false when the name is taken already.
 */
export async function writeNewFile(path: string, bytes: Uint8Array): Promise<boolean> {
	const folder = dirname(path);
	await mkdir(folder, { recursive: true, mode: 0o700 });
	const temporary = `${path}.${randomUUID()}.part`;
	await writeSynced(temporary, bytes);
	try {
		await link(temporary, path);
	} catch (error) {
		if (isCode(error, 'EEXIST')) return false;
		throw error;
	} finally {
		await rm(temporary, { force: true });
	}
	await syncFolder(folder);
	return true;
}

/** The bytes of a file, or undefined when there is none. */
export async function readIfThere(path: string): Promise<Uint8Array | undefined> {
	try {
		return await readFile(path);
	} catch (error) {
		if (isCode(error, 'ENOENT')) return undefined;
		throw error;
	}
}

/** Overwrites a file with zeros, removes it and makes the removal last. Absent files are fine. */
export async function destroyFile(path: string): Promise<void> {
	const bytes = await readIfThere(path);
	if (bytes === undefined) return;
	await writeSynced(path, new Uint8Array(bytes.length), 'r+');
	await rm(path, { force: true });
	await syncFolder(dirname(path));
}

async function writeSynced(path: string, bytes: Uint8Array, flags = 'wx'): Promise<void> {
	const file = await open(path, flags, 0o600);
	try {
		await file.writeFile(bytes);
		await file.sync();
	} finally {
		await file.close();
	}
}

async function syncFolder(folder: string): Promise<void> {
	const handle = await open(folder, 'r');
	try {
		await handle.sync();
	} finally {
		await handle.close();
	}
}

function isCode(error: unknown, code: string): boolean {
	return error instanceof Error && 'code' in error && error.code === code;
}
