import { existsSync } from 'node:fs';
import { resolve } from 'node:path';
import { drizzle } from 'drizzle-orm/postgres-js';
import { migrate } from 'drizzle-orm/postgres-js/migrator';
import PgBoss from 'pg-boss';
import postgres from 'postgres';
import { ownerConfig } from '$lib/server/config';
import { queueNames } from '$lib/server/jobs/queues';

const lockKey = 7_205_001;

/** Brings the database up to date: roles, migrations, job queues and their grants. Safe to repeat. */
async function main(): Promise<void> {
	const { OVALRY_OWNER_URL: url, OVALRY_APP_PASSWORD, OVALRY_RESEARCH_PASSWORD } = ownerConfig();
	const sql = postgres(url, { max: 1, onnotice: () => {} });
	try {
		await sql`select pg_advisory_lock(${lockKey})`;
		await ensureRole(sql, 'ovalry_app', OVALRY_APP_PASSWORD);
		await ensureRole(sql, 'ovalry_research', OVALRY_RESEARCH_PASSWORD);
		await applyMigrations(url);
		await prepareQueues(url);
		await grantQueues(sql);
		console.log('Database is up to date.');
	} finally {
		await sql.end({ timeout: 3 });
	}
}

async function ensureRole(sql: postgres.Sql, name: string, password?: string): Promise<void> {
	const found = await sql`select 1 from pg_roles where rolname = ${name}`;
	if (found.length === 0) await sql.unsafe(`create role ${name} login`);
	if (!password) return;
	await sql.unsafe(`alter role ${name} with login password '${password.replaceAll("'", "''")}'`);
}

async function applyMigrations(url: string): Promise<void> {
	const client = postgres(url, { max: 1, onnotice: () => {} });
	try {
		await migrate(drizzle(client), { migrationsFolder: findMigrations() });
	} finally {
		await client.end({ timeout: 3 });
	}
}

function findMigrations(): string {
	const folders = [resolve('drizzle'), resolve(import.meta.dirname, '../../drizzle')];
	const folder = folders.find((path) => existsSync(path));
	if (!folder) throw new Error(`The folder drizzle is missing; looked in ${folders.join(', ')}`);
	return folder;
}

async function prepareQueues(url: string): Promise<void> {
	const boss = new PgBoss({ connectionString: url, supervise: false, schedule: false });
	boss.on('error', (error: Error) => console.error(error.message));
	await boss.start();
	for (const name of queueNames) await boss.createQueue(name);
	await boss.stop({ graceful: false, wait: true });
}

async function grantQueues(sql: postgres.Sql): Promise<void> {
	await sql.unsafe(`
		grant usage on schema pgboss to ovalry_app;
		grant select, insert, update, delete on all tables in schema pgboss to ovalry_app;
		grant usage on all sequences in schema pgboss to ovalry_app;
		grant execute on all functions in schema pgboss to ovalry_app;`);
}

main().then(
	() => process.exit(0),
	(error: unknown) => {
		console.error(error instanceof Error ? error.message : error);
		process.exit(1);
	}
);
