import { execFile } from 'node:child_process';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import { promisify } from 'node:util';
import type { TestProject } from 'vitest/node';
import { buildIsCurrent } from '../../scripts/start/build.mjs';
import { createProcessList } from '../../scripts/start/process-list.mjs';
import { shutDown } from '../../scripts/start/shutdown.mjs';
import { openThrowawayCluster } from '../../scripts/start/throwaway-cluster.mjs';
import { onCluster, urlOf, type TestCluster } from './test-cluster';

const run = promisify(execFile);
const checkout = resolve(import.meta.dirname, '../..');

/**
 * Vitest's global set-up for tests on a real PostgreSQL: takes the cluster that `npm test` started,
 * or starts one of its own, and makes one migrated database that all others are copied from.
 */
export default async function setUp(project: TestProject): Promise<() => Promise<void>> {
	const given = process.env.OVALRY_TEST_CLUSTER;
	const { url, close } = given ? { url: given, close: async () => {} } : await openOwn();
	const cluster: TestCluster = {
		adminUrl: url,
		template: `template_${process.pid}`,
		files: mkdtempSync(join(tmpdir(), 'ovalry-files-')),
		appPassword: 'throw-away-app',
		researchPassword: 'throw-away-research'
	};
	await onCluster(cluster, (sql) => sql.unsafe(`create database ${cluster.template}`));
	await migrateTemplate(cluster);
	project.provide('testCluster', cluster);
	return async () => {
		rmSync(cluster.files, { recursive: true, force: true });
		await close();
	};
}

async function openOwn(): Promise<{ url: string; close: () => Promise<void> }> {
	const processes = createProcessList();
	const cluster = await openThrowawayCluster({ processes, say: console.log });
	const close = async () => {
		await shutDown(processes);
		cluster.remove();
	};
	return { url: cluster.url, close };
}

async function migrateTemplate(cluster: TestCluster): Promise<void> {
	const env = {
		...process.env,
		OVALRY_OWNER_URL: urlOf(cluster, cluster.template),
		OVALRY_APP_PASSWORD: cluster.appPassword,
		OVALRY_RESEARCH_PASSWORD: cluster.researchPassword
	};
	await run(process.execPath, [await builtMigration()], { cwd: checkout, env });
}

/** The program that `npm start` runs too; built apart where the whole build is not up to date. */
async function builtMigration(): Promise<string> {
	if (buildIsCurrent(checkout)) return resolve(checkout, 'build/workers/migrate.js');
	const folder = resolve(checkout, '.data/test-workers');
	const vite = resolve(checkout, 'node_modules/vite/bin/vite.js');
	const words = [vite, 'build', '-c', 'vite.workers.config.ts', '--outDir', folder];
	await run(process.execPath, words, { cwd: checkout, env: { ...process.env, NODE_ENV: '' } });
	return resolve(folder, 'migrate.js');
}
