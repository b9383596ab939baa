import { spawnSync } from 'node:child_process';
import { readdirSync, readFileSync, readlinkSync } from 'node:fs';
import { createServer } from 'node:net';
import { StartFailure } from './failure.mjs';

/** A free port on the loopback interface. */
export function freePort() {
	return new Promise((done, fail) => {
		const server = createServer().once('error', fail);
		server.listen(0, '127.0.0.1', () => {
			const { port } = server.address();
			server.close(() => done(port));
		});
	});
}

/** The wished port if nothing listens on it, another one otherwise. */
export async function portNear(wished) {
	const fits =
		wished <= 65535 && (await isFree(wished, '127.0.0.1')) && (await isFree(wished, '::1'));
	return fits ? wished : freePort();
}

/**
 * Both loopback addresses must be free: a browser sent to "localhost" may try either of them.
 *
 * @throws {StartFailure} that names the program on that port where it can be found
 */
export async function requireFreePort(port, host) {
	const hosts = host === '127.0.0.1' || host === 'localhost' ? ['127.0.0.1', '::1'] : [host];
	for (const address of hosts) {
		const fault = await listenFault(port, address);
		if (fault) throw cannotListen(port, address, fault);
	}
}

async function isFree(port, host) {
	return (await listenFault(port, host)) === null;
}

/** @returns {Promise<string | null>} the code of what went wrong, null if listening works */
function listenFault(port, host) {
	return new Promise((done) => {
		const server = createServer();
		// A computer without IPv6 cannot have its port taken there.
		server.once('error', ({ code }) =>
			done(host === '::1' && ['EADDRNOTAVAIL', 'EAFNOSUPPORT'].includes(code) ? null : code)
		);
		server.listen(port, host, () => server.close(() => done(null)));
	});
}

function cannotListen(port, host, code) {
	const other = `choose another port: PORT=${port < 65000 ? port + 10 : 3000} npm start`;
	if (code === 'EACCES') {
		return new StartFailure(`Port ${port} may be opened by root only.`, `Please ${other}`);
	}
	if (code === 'EADDRNOTAVAIL' || code === 'ENOTFOUND') {
		return new StartFailure(
			`HOST ${host} is no address of this computer.`,
			'Correct HOST or unset it.'
		);
	}
	const who = listenerOn(port);
	return new StartFailure(`Port ${port} is taken${who ? ` by ${who}` : ' by another program'}.`, [
		`Stop that program, or ${other}`
	]);
}

/** Name and number of the program that listens on a port, as far as this account may see it. */
function listenerOn(port) {
	const inode = listeningInode(port);
	if (!inode) return null;
	const own = readdirSync('/proc').filter((name) => /^\d+$/.test(name));
	const pid = own.find((candidate) => holdsSocket(candidate, inode));
	if (!pid) return null;
	const { stdout } = spawnSync('cat', [`/proc/${pid}/comm`], { encoding: 'utf8' });
	return `${stdout.trim()} (process ${pid})`;
}

function listeningInode(port) {
	const wanted = port.toString(16).toUpperCase().padStart(4, '0');
	for (const table of ['/proc/net/tcp', '/proc/net/tcp6']) {
		for (const line of readLines(table)) {
			const [, local, , state, , , , , , inode] = line.trim().split(/\s+/);
			if (state === '0A' && local?.endsWith(`:${wanted}`)) return inode;
		}
	}
	return null;
}

function holdsSocket(pid, inode) {
	try {
		const folder = `/proc/${pid}/fd`;
		return readdirSync(folder).some(
			(fd) => readlinkSync(`${folder}/${fd}`) === `socket:[${inode}]`
		);
	} catch {
		return false;
	}
}

function readLines(file) {
	try {
		return readFileSync(file, 'utf8').split('\n');
	} catch {
		return [];
	}
}
