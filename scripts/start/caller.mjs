import { readFileSync } from 'node:fs';

/**
 * Notices that npm, which runs this script, has gone. npm that is told to end (or is killed) does
 * not tell its script, so a caller that is gone counts as Ctrl-C.
 *
 * @param {() => void} onGone
 */
export function watchCaller(onGone) {
	if (!process.env.npm_lifecycle_event) return;
	const before = callers();
	const timer = setInterval(() => {
		if (callers() === before) return;
		clearInterval(timer);
		onGone();
	}, 150);
	timer.unref();
}

/** The parent, and npm behind it where the parent is the shell that npm put between. */
function callers() {
	const { ppid } = process;
	return `${ppid} ${isShellOfNpm(ppid) ? parentOf(ppid) : ''}`;
}

function isShellOfNpm(pid) {
	try {
		const [program, option] = readFileSync(`/proc/${pid}/cmdline`, 'utf8').split('\0');
		return /(^|\/)(da|ba|a|z)?sh$/.test(program ?? '') && option === '-c';
	} catch {
		return false;
	}
}

function parentOf(pid) {
	try {
		const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
		return stat.slice(stat.lastIndexOf(')') + 2).split(' ')[1];
	} catch {
		return '';
	}
}
