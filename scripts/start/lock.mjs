import { linkSync, readFileSync, renameSync, rmSync, unlinkSync, writeFileSync } from 'node:fs';
import { setTimeout as wait } from 'node:timers/promises';
import { isSameProcess, processStart } from './process-start.mjs';

/**
 * Takes a lock file, or says who holds it. A lock left by a process that is gone is taken over.
 *
 * @param {string} file
 * @param {Record<string, unknown>} note what a second process should be told
 * @returns {{ held: true, update(more: object): void, release(): void } | { held: false, by: object }}
 */
export function takeLock(file, note = {}) {
	const mine = `${file}.${process.pid}`;
	const own = {
		pid: process.pid,
		startedAt: processStart(process.pid),
		since: new Date().toISOString()
	};
	write(mine, { ...own, ...note });
	try {
		for (let tries = 0; tries < 20; tries++) {
			if (linked(mine, file)) return holder(file, { ...own, ...note });
			const other = read(file);
			if (other && isSameProcess(other)) return { held: false, by: other };
			clearStale(file, other);
		}
		throw new Error(`The lock file ${file} cannot be taken; remove it if nothing runs.`);
	} finally {
		rmSync(mine, { force: true });
	}
}

/** Takes a lock, waiting for the other process to be done with it. */
export async function waitForLock(file, { onWait, isInterrupted = () => false }) {
	for (let round = 0; ; round++) {
		const lock = takeLock(file);
		if (lock.held) return lock;
		if (round === 0) onWait(lock.by);
		if (isInterrupted()) return null;
		await wait(300);
	}
}

function holder(file, first) {
	let note = first;
	return {
		held: true,
		update(more) {
			note = { ...note, ...more };
			write(`${file}.new`, note);
			renameSync(`${file}.new`, file);
		},
		release() {
			if (read(file)?.pid === process.pid) rmSync(file, { force: true });
		}
	};
}

/** Moves a dead process's lock away; puts it back if another start was quicker. */
function clearStale(file, expected) {
	const aside = `${file}.stale.${process.pid}`;
	try {
		renameSync(file, aside);
	} catch {
		return;
	}
	const moved = read(aside);
	const theirs = moved && moved.pid !== expected?.pid && isSameProcess(moved);
	if (theirs) linked(aside, file);
	unlinkSync(aside);
}

function linked(from, to) {
	try {
		linkSync(from, to);
		return true;
	} catch (error) {
		if (error.code === 'EEXIST') return false;
		throw error;
	}
}

function write(file, note) {
	writeFileSync(file, JSON.stringify(note), { mode: 0o644 });
}

function read(file) {
	try {
		return JSON.parse(readFileSync(file, 'utf8'));
	} catch {
		return null;
	}
}
