import { mkdtempSync, readFileSync, rmSync, mkdirSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { parseSettings, type Settings } from '$lib/server/config';
import { buildIsCurrent } from '../../../scripts/start/build.mjs';
import { applicationEnvironment } from '../../../scripts/start/environment.mjs';
import { freePort } from '../../../scripts/start/ports.mjs';
import { createProcessList } from '../../../scripts/start/process-list.mjs';
import { readSecrets } from '../../../scripts/start/secrets.mjs';
import { createServices } from '../../../scripts/start/services.mjs';
import { shutDown } from '../../../scripts/start/shutdown.mjs';
import type { TestDatabase } from '../create-database';

const checkout = resolve(import.meta.dirname, '../../..');
const frozenClock = pathToFileURL(resolve(import.meta.dirname, 'frozen-clock.mjs')).href;

/** Where the pages say they are; the same for every server, whatever its port. */
export const sameOrigin = 'http://localhost:3000';

export type Home = {
	settings: Settings;
	environment: Record<string, string>;
	folder: string;
	remove(): void;
};

/** Key folder and settings of one database's application. */
export function openHome(database: TestDatabase): Home {
	const folder = mkdtempSync(join(tmpdir(), 'ovalry-twin-'));
	for (const name of ['keys', 'logs']) mkdirSync(join(folder, name), { mode: 0o700 });
	const environment: Record<string, string> = applicationEnvironment({
		mode: 'own',
		settings: { given: {}, proxy: {}, host: '127.0.0.1', port: 3000, origin: sameOrigin },
		secrets: { ...readSecrets(folder), appPassword: new URL(database.appUrl).password },
		appUrl: database.appUrl,
		keys: join(folder, 'keys'),
		mailbox: { smtpPort: 2525, url: 'http://localhost:8025' }
	});
	return {
		settings: parseSettings(environment),
		environment,
		folder,
		remove: () => rmSync(folder, { recursive: true, force: true })
	};
}

export type WebServer = { url: string; readLog(): string; stop(): Promise<void> };

/** The built web server by itself, for which it stays `nowMs`. */
export async function startWeb(home: Home, nowMs: number): Promise<WebServer> {
	if (!buildIsCurrent(checkout)) {
		throw new Error('build/ is not up to date with the source: npm run build');
	}
	const port = await freePort();
	const processes = createProcessList();
	const logs = join(home.folder, 'logs');
	const services = createServices({
		processes,
		folder: checkout,
		account: {},
		logs,
		say: console.log
	});
	const url = `http://127.0.0.1:${port}`;
	const env = {
		...home.environment,
		PORT: String(port),
		TEST_NOW_MS: String(nowMs),
		NODE_OPTIONS: `--import=${frozenClock}`
	};
	await services.startAll([
		{ name: 'web', what: 'web server', script: 'build/index.js', env, probe: `${url}/` }
	]);
	return {
		url,
		readLog: () => readFileSync(join(logs, 'web.log'), 'utf8'),
		stop: () => shutDown(processes)
	};
}
