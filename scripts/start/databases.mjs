import { createHash } from 'node:crypto';
import { existsSync, renameSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { clusterUrl, runSql } from './run-sql.mjs';

/** One database for each variant, so that they never mix. */
export const databaseNames = {
	demo: 'ovalry_demo',
	rehearsal: 'ovalry_rehearsal',
	own: 'ovalry_own'
};

/** Folder of the keys and mails that belong to a database on another server. */
export function givenFolder(url) {
	const { host, pathname } = new URL(url);
	return `database-${createHash('sha256').update(`${host}${pathname}`).digest('hex').slice(0, 8)}`;
}

/**
 * Brings the database of a variant into being in the own cluster. The demo is migrated and seeded
 * under another name and takes its place when whole: one cut short is never seen, and renewing it
 * keeps the old one until the new one is ready.
 *
 * @param {{ variant: string, fresh: boolean, home: string, cluster: object }} plan
 * @param {(target: { ownerUrl: string, folder: string, isNew: boolean }) => Promise<void>} fill
 *   migrates and seeds; `folder` is where that variant keeps its keys and mails
 */
export async function provideDatabase({ variant, fresh, home, cluster }, fill) {
	const name = databaseNames[variant];
	const urlOf = (database) => clusterUrl({ ...cluster, database });
	const folder = join(home, variant);
	await dropLeftover({ name: `${name}_new`, folder: `${folder}.new`, cluster });
	const isNew = fresh || !(await databaseExists(cluster, name));
	if (!isNew) {
		await fill({ ownerUrl: urlOf(name), folder, isNew });
		return { ownerUrl: urlOf(name), folder };
	}
	await runSql(cluster, `create database ${name}_new template template0 encoding 'UTF8'`);
	await fill({ ownerUrl: urlOf(`${name}_new`), folder: `${folder}.new`, isNew });
	if (variant === 'own') keepOldKeys(folder);
	await putInPlace({ name, folder, cluster });
	return { ownerUrl: urlOf(name), folder };
}

async function putInPlace({ name, folder, cluster }) {
	await runSql(cluster, `drop database if exists ${name} with (force)`);
	rmSync(folder, { recursive: true, force: true });
	await runSql(cluster, `alter database ${name}_new rename to ${name}`);
	renameSync(`${folder}.new`, folder);
}

/** Keys whose database is gone may still open a backup of it: they are never thrown away. */
function keepOldKeys(folder) {
	if (existsSync(folder)) renameSync(folder, `${folder}-kept-${Date.now()}`);
}

async function dropLeftover({ name, folder, cluster }) {
	const real = name.replace(/_new$/, '');
	// Cut short between the two renames: the database is in place, its folder not yet.
	if (
		existsSync(folder) &&
		!existsSync(folder.replace(/\.new$/, '')) &&
		(await databaseExists(cluster, real))
	) {
		renameSync(folder, folder.replace(/\.new$/, ''));
	}
	if (!(await databaseExists(cluster, name)) && !existsSync(folder)) return;
	await runSql(cluster, `drop database if exists ${name} with (force)`);
	rmSync(folder, { recursive: true, force: true });
}

async function databaseExists(cluster, name) {
	return (await runSql(cluster, `select 1 from pg_database where datname = '${name}'`)) === '1';
}
