import { execFileSync } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { freePort } from '../../scripts/start/ports.mjs';
import { openBench, ordinary, type StartBench } from './start-bench';
import { isRoot, npmStart, processesOf } from './start-harness';

describe('npm start in trouble', () => {
	const account = ordinary;
	let bench: StartBench;
	beforeAll(async () => void (bench = await openBench(account)));
	afterEach(() => bench.endStart());
	afterAll(() => bench.remove());

	it('refuses a second start from the same folder, and leaves the first alone', async () => {
		const { start, data } = await bench.beginAndWait();
		const second = npmStart(bench.checkout, { environment: { PORT: String(await freePort()) } });
		expect(await second.ended()).toBe(1);
		expect(second.output()).toContain(
			`Ovalry runs already from ${data}: http://localhost:${bench.port}`
		);
		expect(start.isRunning()).toBe(true);
		expect((await fetch(`http://localhost:${bench.port}/`)).status).toBeGreaterThan(0);
	});

	it('ends what a killed start left behind, and carries on', async () => {
		const { start, data } = await bench.beginAndWait();
		const lock = JSON.parse(readFileSync(join(data, 'lock'), 'utf8')) as { pid: number };
		process.kill(lock.pid, 'SIGKILL');
		await start.ended();
		const left = processesOf(data).map(({ pid }) => pid);
		expect(left.length).toBeGreaterThanOrEqual(5);
		const again = await bench.beginAndWait();
		expect(again.start.output()).toMatch(/Ended \d programs? that an earlier start left behind/);
		const now = processesOf(data).map(({ pid }) => pid);
		expect(left.filter((pid) => now.includes(pid))).toEqual([]);
	});

	it('carries on after it was killed while it made the demo', async () => {
		const start = bench.begin({ words: ['--fresh'] });
		await start.until(/Making the demo/);
		await wait(400);
		const data = join(bench.folder, '.data');
		const lock = JSON.parse(readFileSync(join(data, 'lock'), 'utf8')) as { pid: number };
		process.kill(lock.pid, 'SIGKILL');
		await start.ended();
		const again = await bench.beginAndWait();
		expect(await (await fetch(`http://localhost:${bench.port}/`)).text()).toContain('<html');
		again.start.pressCtrlC();
		await again.start.ended();
		expect(processesOf(data)).toEqual([]);
	});

	it('starts a web server again that ended by itself', async () => {
		const { start, data } = await bench.beginAndWait();
		const web = processesOf(data).find(({ command }) => command.includes('build/index.js'));
		process.kill(web?.pid ?? 0, 'SIGKILL');
		await start.until(/The web server ended by itself \(SIGKILL\); starting it again/);
		const until = Date.now() + 20_000;
		let status = 0;
		while (status === 0 && Date.now() < until) {
			status = await fetch(`http://localhost:${bench.port}/`).then(
				(reply) => reply.status,
				() => 0
			);
			await wait(50);
		}
		expect(status).toBeGreaterThan(0);
	});

	it('ends itself and all the rest where PostgreSQL ends', async () => {
		const { start, data } = await bench.beginAndWait();
		const server = processesOf(data).find(({ command }) => /bin\/postgres -D/.test(command));
		process.kill(server?.pid ?? 0, 'SIGQUIT');
		expect(await start.ended()).toBe(1);
		expect(start.output()).toContain('PostgreSQL ended by itself');
		expect(processesOf(data)).toEqual([]);
	});

	it('refuses a data folder of another PostgreSQL version', async () => {
		const folder = join(bench.folder, '.old-data');
		mkdirSync(join(folder, 'cluster'), { recursive: true });
		writeFileSync(join(folder, 'cluster/PG_VERSION'), '12\n');
		writeFileSync(join(folder, 'secrets.json'), '{}');
		if (account.uid !== undefined) {
			execFileSync('chown', ['-R', `${account.uid}:${account.gid}`, folder]);
		}
		const start = bench.begin({ environment: { OVALRY_DATA: folder } });
		expect(await start.ended()).toBe(1);
		expect(start.output()).toContain('was made by PostgreSQL 12');
	});

	it('leaves nothing of itself in the terminal but what a person needs', async () => {
		const { start } = await bench.beginAndWait();
		const lines = start
			.output()
			.split('\n')
			.filter((line) => /error|warn|deprecat/i.test(line));
		expect(lines).toEqual([]);
		expect(existsSync(join(bench.folder, 'test-results'))).toBe(false);
	});

	it.runIf(isRoot)('says that the disk is full, and carries on when it no longer is', async () => {
		const folder = join(bench.folder, '.small');
		mkdirSync(folder);
		execFileSync('mount', ['-t', 'tmpfs', '-o', 'size=60m', 'tmpfs', folder]);
		if (account.uid !== undefined) execFileSync('chown', [`${account.uid}:${account.gid}`, folder]);
		try {
			const start = bench.begin({ environment: { OVALRY_DATA: folder } });
			expect(await start.ended()).toBe(1);
			expect(start.output()).toMatch(/The disk that holds .* is full/);
			expect(start.output()).toContain('OVALRY_DATA=/path/on/another/disk');
			execFileSync('mount', ['-o', 'remount,size=2g', folder]);
			const { start: second } = await bench.beginAndWait({
				environment: { OVALRY_DATA: folder }
			});
			second.pressCtrlC();
			await second.ended();
		} finally {
			execFileSync('umount', [folder]);
		}
	});
});
