import { execFileSync } from 'node:child_process';
import { existsSync, mkdirSync, readFileSync, rmSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { setTimeout as wait } from 'node:timers/promises';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { freePort } from '../../scripts/start/ports.mjs';
import {
	copyProject,
	dataFolderOf,
	isRoot,
	isUp,
	msUntilGone,
	npmStart,
	processesOf,
	type Account,
	type Checkout,
	type Running,
	type StartOptions
} from './start-harness';

const id = (option: string, name: string) =>
	Number(execFileSync('id', [option, name], { encoding: 'utf8' }));

/** An account that may do nothing in particular; the caller's own where that is not root. */
const ordinary: Account = isRoot ? { uid: id('-u', 'nobody'), gid: id('-g', 'nobody') } : {};

type Situation = { who: string; account: Account; mode: number };

/** Everything is tried as an ordinary user; as root only what differs there. */
const situations: Situation[] = [
	{ who: 'an ordinary user', account: ordinary, mode: 0o755 },
	...(isRoot
		? [
				{ who: 'root, in a folder that others can read', account: {}, mode: 0o755 },
				{ who: 'root, in a folder shut to others', account: {}, mode: 0o700 }
			]
		: [])
];

describe.each(situations)('npm start as $who', ({ account, mode }) => {
	const isOrdinary = account === ordinary;
	const everyCase = it.runIf(isOrdinary);
	let checkout: Checkout;
	let port: string;
	let running: Running | null = null;
	const dataFolders = new Set<string>();

	beforeAll(async () => {
		checkout = copyProject(account, mode);
		port = String(await freePort());
	});
	afterEach(async () => {
		if (running?.isRunning()) running.pressCtrlC();
		await running?.ended();
		running = null;
	});
	afterAll(() => {
		checkout.remove();
		for (const folder of dataFolders) rmSync(folder, { recursive: true, force: true });
	});

	function begin(options: StartOptions = {}): Running {
		const environment = { PORT: port, ...options.environment };
		running = npmStart(checkout, { ...options, environment });
		return running;
	}

	async function beginAndWait(
		options: StartOptions = {}
	): Promise<{ start: Running; data: string }> {
		const start = begin(options);
		await start.until(isUp);
		const data = dataFolderOf(start.output());
		dataFolders.add(data);
		return { start, data };
	}

	it('runs an empty lab, and Ctrl-C ends all of it within three seconds', async () => {
		const { start, data } = await beginAndWait({ words: ['--empty'] });
		expect(start.output()).toMatch(/Set up your lab +http:\/\/localhost:\d+\/setup\/[\w-]{40,}/);
		expect(processesOf(data).length).toBeGreaterThanOrEqual(4);
		start.pressCtrlC();
		expect(await msUntilGone(data)).toBeLessThan(3_000);
		await start.ended();
	});

	it('runs nothing as root but itself, and shuts keys and secrets', async () => {
		const { data } = await beginAndWait({ words: ['--empty'] });
		expect(processesOf(data).filter(({ uid }) => uid === 0)).toEqual([]);
		expect(statSync(join(data, 'secrets.json')).mode & 0o777).toBe(0o600);
		for (const name of ['cluster', 'own/keys', 'own/mailbox']) {
			expect(statSync(join(data, name)).mode & 0o777).toBe(0o700);
		}
		if (!isRoot || account.uid !== undefined) return;
		const uidOf = (word: string) =>
			processesOf(data).find(({ command }) => command.includes(word))?.uid;
		expect(uidOf('/bin/postgres ')).toBe(id('-u', 'postgres'));
		for (const word of ['build/index.js', 'jobs.js', 'mailbox.js'])
			expect(uidOf(word)).toBe(id('-u', 'ovalry'));
	});

	it('makes the demo, and the second time takes seconds', async () => {
		const first = await beginAndWait();
		expect(first.start.output()).toContain('the demo');
		first.start.pressCtrlC();
		await first.start.ended();
		const begun = Date.now();
		const second = await beginAndWait();
		expect(second.start.output()).not.toContain('Making the demo');
		expect(second.start.output()).not.toContain('Copying');
		// Two to three seconds on a computer at rest; the bound leaves room for a busy one, while the
		// build (or the packages) alone would take longer.
		expect(Date.now() - begun).toBeLessThan(30_000);
	});

	everyCase('refuses a second start from the same folder, and leaves the first alone', async () => {
		const { start, data } = await beginAndWait();
		const second = npmStart(checkout, { environment: { PORT: String(await freePort()) } });
		expect(await second.ended()).toBe(1);
		expect(second.output()).toContain(`Ovalry runs already from ${data}: http://localhost:${port}`);
		expect(start.isRunning()).toBe(true);
		expect((await fetch(`http://localhost:${port}/`)).status).toBeGreaterThan(0);
	});

	it('ends what a killed start left behind, and carries on', async () => {
		const { start, data } = await beginAndWait();
		const lock = JSON.parse(readFileSync(join(data, 'lock'), 'utf8')) as { pid: number };
		process.kill(lock.pid, 'SIGKILL');
		await start.ended();
		const left = processesOf(data).map(({ pid }) => pid);
		expect(left.length).toBeGreaterThanOrEqual(5);
		const again = await beginAndWait();
		expect(again.start.output()).toMatch(/Ended \d programs? that an earlier start left behind/);
		const now = processesOf(data).map(({ pid }) => pid);
		expect(left.filter((pid) => now.includes(pid))).toEqual([]);
	});

	everyCase('carries on after it was killed while it made the demo', async () => {
		const start = begin({ words: ['--fresh'] });
		await start.until(/Making the demo/);
		await wait(400);
		const data = [...dataFolders][0] ?? '';
		const lock = JSON.parse(readFileSync(join(data, 'lock'), 'utf8')) as { pid: number };
		process.kill(lock.pid, 'SIGKILL');
		await start.ended();
		const again = await beginAndWait();
		expect(await (await fetch(`http://localhost:${port}/`)).text()).toContain('<html');
		again.start.pressCtrlC();
		await again.start.ended();
		expect(processesOf(data)).toEqual([]);
	});

	everyCase('starts a web server again that ended by itself', async () => {
		const { start, data } = await beginAndWait();
		const web = processesOf(data).find(({ command }) => command.includes('build/index.js'));
		process.kill(web?.pid ?? 0, 'SIGKILL');
		await start.until(/The web server ended by itself \(SIGKILL\); starting it again/);
		const until = Date.now() + 20_000;
		let status = 0;
		while (status === 0 && Date.now() < until) {
			status = await fetch(`http://localhost:${port}/`).then(
				(reply) => reply.status,
				() => 0
			);
			await wait(50);
		}
		expect(status).toBeGreaterThan(0);
	});

	everyCase('ends itself and all the rest where PostgreSQL ends', async () => {
		const { start, data } = await beginAndWait();
		const server = processesOf(data).find(({ command }) => /bin\/postgres -D/.test(command));
		process.kill(server?.pid ?? 0, 'SIGQUIT');
		expect(await start.ended()).toBe(1);
		expect(start.output()).toContain('PostgreSQL ended by itself');
		expect(processesOf(data)).toEqual([]);
	});

	it('ends with npm, however npm is ended', async () => {
		for (const signal of ['SIGTERM', 'SIGKILL'] as const) {
			const { start, data } = await beginAndWait();
			start.child.kill(signal);
			expect(await msUntilGone(data)).toBeLessThan(3_500);
			await start.ended();
		}
	});

	everyCase('refuses a data folder of another PostgreSQL version', async () => {
		const folder = join(checkout.folder, '.old-data');
		mkdirSync(join(folder, 'cluster'), { recursive: true });
		writeFileSync(join(folder, 'cluster/PG_VERSION'), '12\n');
		writeFileSync(join(folder, 'secrets.json'), '{}');
		if (account.uid !== undefined) {
			execFileSync('chown', ['-R', `${account.uid}:${account.gid}`, folder]);
		}
		const start = begin({ environment: { OVALRY_DATA: folder } });
		expect(await start.ended()).toBe(1);
		expect(start.output()).toContain('was made by PostgreSQL 12');
	});

	// Only root can make a disk that is too small.
	it.runIf(isRoot && account.uid !== undefined)(
		'says that the disk is full, and carries on when it no longer is',
		async () => {
			const folder = join(checkout.folder, '.small');
			mkdirSync(folder);
			execFileSync('mount', ['-t', 'tmpfs', '-o', 'size=60m', 'tmpfs', folder]);
			if (account.uid !== undefined)
				execFileSync('chown', [`${account.uid}:${account.gid}`, folder]);
			try {
				const start = begin({ environment: { OVALRY_DATA: folder } });
				expect(await start.ended()).toBe(1);
				expect(start.output()).toMatch(/The disk that holds .* is full/);
				expect(start.output()).toContain('OVALRY_DATA=/path/on/another/disk');
				execFileSync('mount', ['-o', 'remount,size=2g', folder]);
				const { start: second } = await beginAndWait({ environment: { OVALRY_DATA: folder } });
				second.pressCtrlC();
				await second.ended();
			} finally {
				execFileSync('umount', [folder]);
			}
		}
	);

	everyCase('leaves nothing of itself in the terminal but what a person needs', async () => {
		const { start } = await beginAndWait();
		const lines = start
			.output()
			.split('\n')
			.filter((line) => /error|warn|deprecat/i.test(line));
		expect(lines).toEqual([]);
		expect(existsSync(join(checkout.folder, 'test-results'))).toBe(false);
	});
});
