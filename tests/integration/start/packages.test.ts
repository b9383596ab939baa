import {
	chmodSync,
	existsSync,
	mkdirSync,
	mkdtempSync,
	readFileSync,
	rmSync,
	writeFileSync
} from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { requirePackages } from '../../../scripts/start/debian-packages.mjs';
import { describeFailure } from '../../../scripts/start/failure.mjs';
import { installPackages, packagesAreCurrent } from '../../../scripts/start/node-packages.mjs';
import { createProcessList } from '../../../scripts/start/process-list.mjs';

let folder: string;
const said: string[] = [];
beforeEach(() => {
	folder = mkdtempSync(join(tmpdir(), 'ovalry-packages-'));
	said.length = 0;
});
afterEach(() => rmSync(folder, { recursive: true, force: true }));

/** A program of that name on a search path of its own. */
function fakeProgram(name: string, script: string): string {
	const bin = join(folder, 'bin');
	mkdirSync(bin, { recursive: true });
	writeFileSync(join(bin, name), `#!/bin/sh\n${script}\n`);
	chmodSync(join(bin, name), 0o755);
	return `${bin}:/usr/bin:/bin`;
}

const context = (isRoot: boolean, path: string) => ({
	processes: createProcessList(),
	say: (line: string) => void said.push(line),
	isRoot,
	path,
	etc: join(folder, 'etc')
});

const missing = { name: 'postgresql', what: 'PostgreSQL', isThere: () => false };

async function faultOf(work: Promise<unknown>): Promise<string> {
	try {
		await work;
	} catch (error) {
		return describeFailure(error);
	}
	return 'no fault';
}

describe('a missing Debian package', () => {
	it('is asked for by the exact command where the caller is not root', async () => {
		const path = fakeProgram('apt-get', 'exit 1');
		const words = await faultOf(requirePackages([missing], context(false, path)));
		expect(words).toContain('PostgreSQL is missing');
		expect(words).toContain('sudo apt-get install postgresql');
	});

	it('leads to other ways where there is no apt-get', async () => {
		const words = await faultOf(requirePackages([missing], context(true, folder)));
		expect(words).toContain('no apt-get');
		expect(words).toContain('OVALRY_POSTGRES_BIN');
		expect(words).toContain('DATABASE_URL');
	});

	it('is installed where the caller is root, without a server of its own', async () => {
		const done = join(folder, 'done');
		const setting = 'etc/postgresql-common/createcluster.d/ovalry.conf';
		const path = fakeProgram(
			'apt-get',
			`case "$*" in *install*) echo "$@" > ${done}; cat ${join(folder, setting)} >> ${done};; esac`
		);
		const wanted = { ...missing, isThere: () => existsSync(done) };
		await requirePackages([wanted], context(true, path));
		expect(readFileSync(done, 'utf8')).toMatch(/install --no-install-recommends postgresql\n/);
		expect(readFileSync(done, 'utf8')).toContain('create_main_cluster = false');
		expect(existsSync(join(folder, setting))).toBe(false);
		expect(said).toEqual(['Installing postgresql with apt-get']);
	});

	it("shows apt-get's own words where it fails", async () => {
		const path = fakeProgram(
			'apt-get',
			'echo "E: Unable to locate package postgresql" >&2; exit 100'
		);
		const words = await faultOf(requirePackages([missing], context(true, path)));
		expect(words).toContain('| E: Unable to locate package postgresql');
		expect(words).toContain('apt-get install postgresql');
	});

	it('says that the disk is full where that is the cause', async () => {
		const path = fakeProgram(
			'apt-get',
			'echo "write error: No space left on device" >&2; exit 100'
		);
		const words = await faultOf(requirePackages([missing], context(true, path)));
		expect(words).toContain('The disk is full');
	});
});

describe('the Node packages', () => {
	const lock = {
		packages: {
			'': { name: 'x' },
			'node_modules/a': { version: '1.0.0' },
			'node_modules/b': { version: '2.0.0', optional: true }
		}
	};
	const write = (file: string, content: unknown) => {
		mkdirSync(join(folder, 'node_modules'), { recursive: true });
		writeFileSync(join(folder, file), JSON.stringify(content));
	};

	it("are current where npm's own note agrees with the lock file, optional ones aside", () => {
		write('package-lock.json', lock);
		write('node_modules/.package-lock.json', {
			packages: { 'node_modules/a': { version: '1.0.0' } }
		});
		expect(packagesAreCurrent(folder)).toBe(true);
	});

	it.each([
		['another version', { 'node_modules/a': { version: '0.9.0' } }],
		['a missing package', {}],
		[
			'a package too many',
			{ 'node_modules/a': { version: '1.0.0' }, 'node_modules/c': { version: '1.0.0' } }
		]
	])('are not current with %s', (_, packages) => {
		write('package-lock.json', lock);
		write('node_modules/.package-lock.json', { packages });
		expect(packagesAreCurrent(folder)).toBe(false);
	});

	it('are not current after an install that was cut short', () => {
		write('package-lock.json', lock);
		expect(packagesAreCurrent(folder)).toBe(false);
	});

	it("fail with npm's words and a remedy where the registry cannot be reached", async () => {
		write('package-lock.json', lock);
		const path = fakeProgram('npm', 'echo "npm error network request failed" >&2; exit 1');
		const before = { PATH: process.env.PATH, npm_execpath: process.env.npm_execpath };
		process.env.PATH = path;
		delete process.env.npm_execpath;
		const words = await faultOf(installPackages(folder, context(false, path)));
		process.env.PATH = before.PATH;
		if (before.npm_execpath) process.env.npm_execpath = before.npm_execpath;
		expect(words).toContain('| npm error network request failed');
		expect(words).toContain('Check the connection');
	});
});
