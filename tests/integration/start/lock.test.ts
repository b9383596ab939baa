import { spawn, type ChildProcess } from 'node:child_process';
import { existsSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { createServer, type Server } from 'node:net';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { describeFailure } from '../../../scripts/start/failure.mjs';
import { endLeftovers } from '../../../scripts/start/leftovers.mjs';
import { takeLock } from '../../../scripts/start/lock.mjs';
import { portNear, requireFreePort } from '../../../scripts/start/ports.mjs';
import { processStart } from '../../../scripts/start/process-start.mjs';

let folder: string;
const children: ChildProcess[] = [];
beforeEach(() => (folder = mkdtempSync(join(tmpdir(), 'ovalry-lock-'))));
afterEach(() => {
	for (const child of children.splice(0)) child.kill('SIGKILL');
	rmSync(folder, { recursive: true, force: true });
});

/** A process that does nothing, in a group of its own. */
function idle(): ChildProcess & { pid: number } {
	const child = spawn('sleep', ['60'], { detached: true, stdio: 'ignore' });
	children.push(child);
	if (!child.pid) throw new Error('sleep did not start');
	return Object.assign(child, { pid: child.pid });
}

const ended = (child: ChildProcess) => new Promise((done) => child.once('exit', done));

describe('the lock of a data folder', () => {
	const file = () => join(folder, 'lock');

	it('is held by one, and tells the other who holds it', async () => {
		const script = `
			const { takeLock } = await import(${JSON.stringify(resolve('scripts/start/lock.mjs'))});
			console.log(JSON.stringify(takeLock(${JSON.stringify(file())}, {})));`;
		const lock = takeLock(file(), { address: 'http://localhost:3000' });
		expect(lock.held).toBe(true);
		const other = JSON.parse(await outputOf(script)) as { held: boolean; by: object };
		expect(other).toMatchObject({
			held: false,
			by: { pid: process.pid, address: 'http://localhost:3000' }
		});
	});

	it('is taken over from a process that is gone', () => {
		writeFileSync(file(), JSON.stringify({ pid: 2 ** 22 + 1, startedAt: 'long ago' }));
		expect(takeLock(file(), {}).held).toBe(true);
	});

	it('is taken over where another process has got the same number', () => {
		writeFileSync(file(), JSON.stringify({ pid: idle().pid, startedAt: 'another boot 17' }));
		expect(takeLock(file(), {}).held).toBe(true);
	});

	it('is taken over where its file is damaged', () => {
		writeFileSync(file(), '{"pid": 12');
		expect(takeLock(file(), {}).held).toBe(true);
	});

	it('is gone after it was released', () => {
		const lock = takeLock(file(), {});
		if (lock.held) lock.release();
		expect(existsSync(file())).toBe(false);
	});

	it('goes to exactly one of many that come at once', async () => {
		writeFileSync(file(), JSON.stringify({ pid: 2 ** 22 + 1, startedAt: 'long ago' }));
		const script = `
			const { takeLock } = await import(${JSON.stringify(resolve('scripts/start/lock.mjs'))});
			console.log(takeLock(${JSON.stringify(file())}, {}).held);
			setTimeout(() => {}, 1500);`;
		const answers = await Promise.all(Array.from({ length: 6 }, () => outputOf(script)));
		expect(answers.filter((answer) => answer.trim() === 'true')).toHaveLength(1);
	});
});

describe('what a killed start left behind', () => {
	it('is ended where it is still the noted process, and only then', async () => {
		const left = idle();
		const other = idle();
		const list = join(folder, 'running.json');
		writeFileSync(
			list,
			JSON.stringify([
				{ name: 'web', pid: left.pid, startedAt: processStart(left.pid) },
				{ name: 'worker', pid: other.pid, startedAt: 'another boot 17' }
			])
		);
		const gone = ended(left);
		expect(await endLeftovers(list)).toBe(1);
		await gone;
		expect(processStart(other.pid)).not.toBeNull();
		expect(existsSync(list)).toBe(false);
	});
});

describe('a port', () => {
	let server: Server;
	let port: number;
	beforeEach(async () => {
		server = createServer().listen(0, '127.0.0.1');
		await new Promise((done) => server.once('listening', done));
		const address = server.address();
		port = typeof address === 'object' && address ? address.port : 0;
	});
	afterEach(() => void server.close());

	it('that is taken is named with the program on it and a remedy', async () => {
		const words = await requireFreePort(port, '127.0.0.1').then(() => 'free', describeFailure);
		expect(words).toContain(`Port ${port} is taken by`);
		expect(words).toContain(`(process ${process.pid})`);
		expect(words).toMatch(/PORT=\d+ npm start/);
	});

	it('is replaced by a free one where any will do', async () => {
		const other = await portNear(port);
		expect(other).not.toBe(port);
		await requireFreePort(other, '127.0.0.1');
	});

	it('on an address that this computer does not have is refused by HOST', async () => {
		const words = await requireFreePort(port, '203.0.113.7').then(() => 'free', describeFailure);
		expect(words).toContain('HOST 203.0.113.7 is no address of this computer');
	});
});

function outputOf(script: string): Promise<string> {
	return new Promise((done) => {
		const words = ['--input-type=module', '-e', script];
		const child = spawn(process.execPath, words, { stdio: ['ignore', 'pipe', 'inherit'] });
		children.push(child);
		let output = '';
		child.stdout.on('data', (bytes: Buffer) => {
			output += bytes.toString();
			if (output.endsWith('\n')) done(output);
		});
	});
}
