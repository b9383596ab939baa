import { sql } from 'drizzle-orm';
import type { Database } from '$lib/server/db/client';

/**
 * Empties every table of a demo that was not finished. Only the owner can, and only the seed calls it
 * before the database is marked as whole.
 */
export async function resetDatabase(owner: Database): Promise<void> {
	const tables = await owner.execute<{ name: string }>(
		sql`select quote_ident(tablename) as name from pg_tables where schemaname = 'public'`
	);
	await owner.transaction(async (tx) => {
		for (const { name } of tables)
			await tx.execute(sql.raw(`alter table ${name} disable trigger user`));
		await tx.execute(sql.raw(`truncate ${tables.map(({ name }) => name).join(', ')} cascade`));
		for (const { name } of tables)
			await tx.execute(sql.raw(`alter table ${name} enable trigger user`));
	});
}
