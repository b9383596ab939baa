import { spawnSync } from 'node:child_process';
import { existsSync, readFileSync } from 'node:fs';

/**
 * When a process began, in words that differ for a later process of the same number; null if there
 * is no such process.
 *
 * @param {number | undefined} pid
 * @returns {string | null}
 */
export function processStart(pid) {
	if (!pid) return null;
	return existsSync('/proc/self/stat') ? startFromProc(pid) : startFromPs(pid);
}

function startFromProc(pid) {
	try {
		const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
		// The name in brackets may hold spaces; the start time is field 22, the state field 3.
		const fields = stat.slice(stat.lastIndexOf(')') + 2).split(' ');
		if (fields[0] === 'Z' || fields[0] === 'X') return null;
		const boot = readFileSync('/proc/sys/kernel/random/boot_id', 'utf8').trim();
		return `${boot} ${fields[19]}`;
	} catch {
		return null;
	}
}

function startFromPs(pid) {
	const { status, stdout } = spawnSync('ps', ['-o', 'lstart=', '-p', String(pid)], {
		encoding: 'utf8'
	});
	return status === 0 && stdout.trim() ? stdout.trim() : null;
}

/** Is the process that wrote this note still the one that runs? */
export function isSameProcess({ pid, startedAt }) {
	const found = processStart(pid);
	return found !== null && found === startedAt;
}
