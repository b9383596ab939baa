import { existsSync, readFileSync, rmSync } from 'node:fs';
import { setTimeout as wait } from 'node:timers/promises';
import { signalGroup } from './process-list.mjs';
import { isSameProcess } from './process-start.mjs';

/**
 * Ends what an earlier start left running when it was killed itself. Only processes that it noted,
 * and that are still the same ones, are touched.
 *
 * @param {string} file the list that start kept
 * @returns {Promise<number>} how many there were
 */
export async function endLeftovers(file) {
	const alive = readNotes(file).filter(isSameProcess);
	for (const signal of ['SIGINT', 'SIGKILL']) {
		for (const { pid } of alive.filter(isSameProcess)) signalGroup(pid, signal);
		for (let tries = 0; tries < 150 && alive.some(isSameProcess); tries++) await wait(20);
	}
	rmSync(file, { force: true });
	return alive.length;
}

function readNotes(file) {
	if (!existsSync(file)) return [];
	try {
		return JSON.parse(readFileSync(file, 'utf8'));
	} catch {
		return [];
	}
}
