import { randomBytes } from 'node:crypto';
import postgres from 'postgres';
import { afterAll, afterEach, beforeAll, describe, expect, it } from 'vitest';
import { createProcessList } from '../../scripts/start/process-list.mjs';
import { shutDown } from '../../scripts/start/shutdown.mjs';
import { openThrowawayCluster } from '../../scripts/start/throwaway-cluster.mjs';
import { openBench, ordinary, type StartBench } from './start-bench';
import { processesOf } from './start-harness';

const processes = createProcessList();
let server: { url: string; remove(): void };
let bench: StartBench;

beforeAll(async () => {
	server = await openThrowawayCluster({ processes, say: console.log });
	bench = await openBench(ordinary);
});
afterEach(() => bench.endStart());
afterAll(async () => {
	bench.remove();
	await shutDown(processes);
	server.remove();
});

async function onServer(statements: string, database = 'postgres'): Promise<void> {
	const url = new URL(server.url);
	url.pathname = `/${database}`;
	const sql = postgres(url.href, { max: 1, onnotice: () => {} });
	await sql.unsafe(statements).finally(() => sql.end());
}

/** An empty database of that server, owned by somebody who is no superuser, as a hoster gives it. */
async function makeDatabase(): Promise<{ name: string; url: string }> {
	const name = `given_${randomBytes(4).toString('hex')}`;
	await onServer(`create role ${name} login createrole password 'given'`);
	await onServer(`create database ${name} owner ${name}`);
	const url = new URL(server.url);
	Object.assign(url, { username: name, password: 'given', pathname: `/${name}` });
	return { name, url: url.href };
}

async function refusal(environment: Record<string, string>, words: string[] = []): Promise<string> {
	const start = bench.begin({ environment, words });
	expect(await start.ended()).toBe(1);
	return start.output();
}

describe('npm start with DATABASE_URL', () => {
	it('sets up an empty database for real work, and starts no server of its own', async () => {
		const { url } = await makeDatabase();
		const { start, data } = await bench.beginAndWait({ environment: { DATABASE_URL: url } });
		expect(start.output()).toContain('Set up your lab');
		expect(start.output()).not.toContain('demo');
		expect(processesOf(data).filter(({ command }) => command.includes('bin/postgres'))).toEqual([]);
	});

	it('knows at the next start what the database was made for', async () => {
		const { url } = await makeDatabase();
		const first = await bench.beginAndWait({
			environment: { DATABASE_URL: url },
			words: ['--rehearse']
		});
		first.start.pressCtrlC();
		await first.start.ended();
		const second = await bench.beginAndWait({ environment: { DATABASE_URL: url } });
		expect(second.start.output()).toContain('a rehearsal on an empty lab');
	});

	it('refuses the demo on a database that its seed did not make', async () => {
		const { url } = await makeDatabase();
		const own = await bench.beginAndWait({ environment: { DATABASE_URL: url } });
		own.start.pressCtrlC();
		await own.start.ended();
		const words = await refusal({ DATABASE_URL: url }, ['--demo']);
		expect(words).toContain("was made for a lab's own work, not for the demo");
		expect(words).toContain('The demo runs only on a database that its seed made');
	});

	it('refuses a rehearsal together with a mail server, also where the database says it is one', async () => {
		const { url } = await makeDatabase();
		const first = await bench.beginAndWait({
			environment: { DATABASE_URL: url },
			words: ['--rehearse']
		});
		first.start.pressCtrlC();
		await first.start.ended();
		const mail = { SMTP_HOST: 'mail.lab.example', MAIL_FROM: 'lab@lab.example' };
		expect(await refusal({ DATABASE_URL: url, ...mail })).toContain(
			'SMTP_HOST: is mail.lab.example'
		);
	});

	it("refuses a database that holds somebody else's tables", async () => {
		const { name, url } = await makeDatabase();
		await onServer('create table orders (id int)', name);
		expect(await refusal({ DATABASE_URL: url })).toContain("tables that are not Ovalry's (orders)");
	});

	it('never drops it', async () => {
		const { url } = await makeDatabase();
		expect(await refusal({ DATABASE_URL: url }, ['--fresh'])).toContain('--fresh would drop');
	});

	it('says what is wrong where no connection comes about, without the password', async () => {
		const { url } = await makeDatabase();
		const wrong = new URL(url);
		wrong.password = 'not-the-one';
		const words = await refusal({ DATABASE_URL: wrong.href });
		expect(words).toContain('DATABASE_URL: no connection to 127.0.0.1');
		expect(words).toContain('password');
		expect(words).not.toContain('not-the-one');
	});
});
