import postgres from 'postgres';

/**
 * Lets a database count where it would draw random ids: the nth row of a table gets the same UUID in
 * every database, so that order by id means the same in two of them.
 */
export async function countInsteadOfDrawing(ownerUrl: string): Promise<void> {
	const sql = postgres(ownerUrl, { max: 1, onnotice: () => {} });
	try {
		await sql.unsafe(`
			create table stand_in_id (name text primary key, taken int not null);
			create function stand_in_id(of text) returns uuid language sql volatile security definer as $$
				insert into stand_in_id values (of, 1)
				on conflict (name) do update set taken = stand_in_id.taken + 1
				returning regexp_replace(
					md5(name || ' ' || taken), '^(.{8})(.{4}).(.{3}).(.{3})(.{12})$', '\\1-\\2-4\\3-8\\4-\\5'
				)::uuid
			$$;`);
		const drawn = await sql<{ name: string }[]>`
			select table_name as name from information_schema.columns
			where table_schema = 'public' and column_name = 'id' and column_default = 'gen_random_uuid()'`;
		for (const { name } of drawn) {
			await sql.unsafe(`alter table ${name} alter column id set default stand_in_id('${name}')`);
		}
	} finally {
		await sql.end();
	}
}
