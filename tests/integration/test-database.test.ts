import postgres from 'postgres';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { createDatabase, type TestDatabase } from '../support/create-database';

let one: TestDatabase;
let two: TestDatabase;

beforeAll(async () => {
	[one, two] = await Promise.all([createDatabase(), createDatabase()]);
});
afterAll(async () => {
	await Promise.all([one.drop(), two.drop()]);
});

async function read<T>(url: string, work: (sql: postgres.Sql) => Promise<T>): Promise<T> {
	const sql = postgres(url, { max: 1, onnotice: () => {} });
	try {
		return await work(sql);
	} finally {
		await sql.end();
	}
}

describe('a test database', () => {
	it('has every table of the migrations and no row', async () => {
		const found = await read(one.ownerUrl, async (sql) => {
			const [{ there }] =
				(await sql`select to_regclass('public.instance') is not null as there`) as [
					{ there: boolean }
				];
			const rows = await sql`select * from instance`;
			return { there, rowCount: rows.length };
		});
		expect(found).toEqual({ there: true, rowCount: 0 });
	});

	it('shares no rows with another one', async () => {
		await read(one.ownerUrl, (sql) => sql`insert into instance (kind) values ('rehearsal')`);
		const other = await read(two.ownerUrl, (sql) => sql`select kind from instance`);
		expect(other).toHaveLength(0);
	});

	it.each([
		['appUrl', 'ovalry_app'],
		['researchUrl', 'ovalry_research'],
		['ownerUrl', 'ovalry_owner']
	] as const)('is reached through %s as %s', async (url, role) => {
		const rows = await read(one[url], (sql) => sql`select current_user as role`);
		expect(rows[0]).toEqual({ role });
	});
});
