import {
	chmodSync,
	chownSync,
	existsSync,
	mkdirSync,
	mkdtempSync,
	readdirSync,
	readFileSync,
	rmSync,
	statSync,
	writeFileSync
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { chooseAccounts } from '../../../scripts/start/accounts.mjs';
import { choosePostgres } from '../../../scripts/start/choose-postgres.mjs';
import {
	createCluster,
	runsOn,
	startCluster,
	stopLeftover
} from '../../../scripts/start/cluster.mjs';
import { provideDatabase } from '../../../scripts/start/databases.mjs';
import { describeFailure } from '../../../scripts/start/failure.mjs';
import { findPostgres } from '../../../scripts/start/find-postgres.mjs';
import { requireSpace } from '../../../scripts/start/node-packages.mjs';
import { createProcessList } from '../../../scripts/start/process-list.mjs';
import { runSql } from '../../../scripts/start/run-sql.mjs';
import { readSecrets } from '../../../scripts/start/secrets.mjs';
import { shutDown } from '../../../scripts/start/shutdown.mjs';

const processes = createProcessList();
const isRoot = process.getuid?.() === 0;
const say = () => {};
const account = chooseAccounts({ isRoot, say, needsDatabase: true }).database as {
	uid?: number;
	gid?: number;
};
const postgres = choosePostgres('/nowhere', findPostgres({}));
const password = 'one-password';
let home: string;
let folder: string;

beforeAll(() => {
	home = mkdtempSync(join(tmpdir(), 'ovalry-cluster-'));
	chmodSync(home, 0o755);
	folder = join(home, 'cluster');
});
afterAll(async () => {
	await shutDown(processes);
	rmSync(home, { recursive: true, force: true });
});

const create = (target: string, list = processes) =>
	createCluster({
		bin: postgres.bin,
		folder: target,
		account,
		password,
		processes: list,
		durable: false
	});

const start = (target: string, list = processes) =>
	startCluster({
		bin: postgres.bin,
		folder: target,
		account,
		processes: list,
		logFile: join(home, 'log'),
		say
	});

const faultOf = (work: Promise<unknown>) => work.then(() => 'no fault', describeFailure);

describe('the own cluster', () => {
	it('is made anew where making it was cut short', async () => {
		mkdirSync(join(home, 'cluster.new/base'), { recursive: true });
		writeFileSync(join(home, 'cluster.new/PG_VERSION'), '15');
		await create(folder);
		expect(readFileSync(join(folder, 'PG_VERSION'), 'utf8').trim()).toBe(String(postgres.major));
		expect(readdirSync(home)).toEqual(['cluster']);
	});

	it('belongs to the database account alone', () => {
		const { mode, uid } = statSync(folder);
		expect(mode & 0o777).toBe(0o700);
		expect(uid).toBe(account.uid ?? process.getuid?.());
	});

	it('of another major version is left alone, and the remedies are named', () => {
		const old = join(home, 'old/cluster');
		mkdirSync(old, { recursive: true });
		writeFileSync(join(old, 'PG_VERSION'), '13\n');
		let words = '';
		try {
			choosePostgres(old, [{ major: 15, bin: '/x' }]);
		} catch (error) {
			words = describeFailure(error);
		}
		expect(words).toContain('was made by PostgreSQL 13; this computer has 15');
		expect(words).toContain('apt-get install postgresql-13');
		expect(words).toContain('OVALRY_DATA=');
		rmSync(join(home, 'old'), { recursive: true });
	});

	it('is opened by the programs of its own version where newer ones are there too', () => {
		const found = [
			{ major: 17, bin: '/seventeen' },
			{ major: postgres.major, bin: '/own' }
		];
		expect(choosePostgres(folder, found).bin).toBe('/own');
	});

	it('is not made where the disk is nearly full', () => {
		expect(() => requireSpace(home, 1e9)).toThrow(/The disk that holds .* is full/);
	});

	it('that cannot start shows the last words of PostgreSQL', async () => {
		const broken = join(home, 'broken');
		mkdirSync(broken, { mode: 0o700 });
		writeFileSync(join(broken, 'PG_VERSION'), String(postgres.major));
		for (const path of [broken, join(broken, 'PG_VERSION')]) {
			if (account.uid !== undefined && account.gid !== undefined)
				chownSync(path, account.uid, account.gid);
		}
		const words = await faultOf(start(broken));
		expect(words).toContain(`PostgreSQL did not start from ${broken}`);
		expect(words).toMatch(/\| .*postgresql\.conf/);
		rmSync(broken, { recursive: true });
	});

	it('left running by a killed start is stopped, and one of another folder is not', async () => {
		const killed = createProcessList();
		const { child } = await start(folder, killed);
		expect(await stopLeftover({ folder: join(home, 'elsewhere'), isSameServer: runsOn })).toBe(
			false
		);
		expect(await stopLeftover({ folder, isSameServer: runsOn })).toBe(true);
		// Node hears of the end of a process a moment after the process is gone.
		await expect.poll(() => child.exitCode ?? child.signalCode).not.toBeNull();
	});
});

describe('the databases of the variants', () => {
	let cluster: { bin: string; port: number; password: string; processes: typeof processes };
	const marks: string[] = [];

	beforeAll(async () => {
		const { port } = await start(folder);
		cluster = { bin: postgres.bin, port, password, processes };
	});

	/** Stands for migrations and seed: leaves a mark in the database and in the folder. */
	async function fill(mark: string, target: { ownerUrl: string; folder: string; isNew: boolean }) {
		const database = new URL(target.ownerUrl).pathname.slice(1);
		if (target.isNew)
			await runSql({ ...cluster, database }, `create table mark as select '${mark}' as word`);
		mkdirSync(join(target.folder, 'keys'), { recursive: true });
		writeFileSync(join(target.folder, 'keys/key'), mark);
		marks.push(mark);
	}

	const provide = (variant: string, mark: string, fresh = false) =>
		provideDatabase({ variant, fresh, home, cluster }, (target) => fill(mark, target));

	const readMark = (database: string) => runSql({ ...cluster, database }, 'select word from mark');
	const databases = async () =>
		(
			await runSql(
				cluster,
				"select datname from pg_database where datname like 'ovalry%' order by 1"
			)
		).split('\n');

	it('do not appear before they are whole', async () => {
		const cutShort = provideDatabase(
			{ variant: 'demo', fresh: false, home, cluster },
			async (target) => {
				await fill('half', target);
				throw new Error('killed');
			}
		);
		await expect(cutShort).rejects.toThrow('killed');
		expect(await databases()).toEqual(['ovalry_demo_new']);
		await provide('demo', 'first');
		expect(await databases()).toEqual(['ovalry_demo']);
		expect(await readMark('ovalry_demo')).toBe('first');
		expect(readFileSync(join(home, 'demo/keys/key'), 'utf8')).toBe('first');
	});

	it('stay as they are at a second start', async () => {
		await provide('demo', 'second');
		expect(await readMark('ovalry_demo')).toBe('first');
	});

	it('keep the old demo where renewing it fails', async () => {
		const failing = provideDatabase({ variant: 'demo', fresh: true, home, cluster }, async () => {
			throw new Error('no');
		});
		await expect(failing).rejects.toThrow('no');
		expect(await readMark('ovalry_demo')).toBe('first');
	});

	it('give way to a renewed demo, keys and all', async () => {
		await provide('demo', 'renewed', true);
		expect(await readMark('ovalry_demo')).toBe('renewed');
		expect(readFileSync(join(home, 'demo/keys/key'), 'utf8')).toBe('renewed');
	});

	it('put the folder in place where a start was killed just before that', async () => {
		const { renameSync } = await import('node:fs');
		renameSync(join(home, 'demo'), join(home, 'demo.new'));
		await provide('demo', 'again');
		expect(await readMark('ovalry_demo')).toBe('renewed');
		expect(existsSync(join(home, 'demo.new'))).toBe(false);
	});

	it('never throw away the keys of a lab whose database is gone', async () => {
		await provide('own', 'lab');
		await runSql(cluster, 'drop database ovalry_own');
		await provide('own', 'new lab');
		const kept = readdirSync(home).filter((name) => name.startsWith('own-kept-'));
		expect(kept).toHaveLength(1);
		expect(readFileSync(join(home, kept[0] ?? '', 'keys/key'), 'utf8')).toBe('lab');
	});
});

describe('the secrets', () => {
	it('are made once, and readable by the starting account alone', () => {
		const place = join(home, 'secrets');
		mkdirSync(place);
		const first = readSecrets(place);
		expect(readSecrets(place)).toEqual(first);
		expect(Buffer.from(first.wrappingKey, 'base64url')).toHaveLength(32);
		expect(statSync(join(place, 'secrets.json')).mode & 0o777).toBe(0o600);
	});

	it('that are lost while the database is there are asked for, not made anew', () => {
		const place = join(home, 'lost');
		mkdirSync(join(place, 'cluster'), { recursive: true });
		expect(() => readSecrets(place)).toThrow(/no secrets.json/);
	});
});
