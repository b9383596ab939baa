import { StartFailure } from './failure.mjs';

/**
 * What an existing database was set up for, read from its `instance` row.
 *
 * @param {string} url
 * @returns {Promise<'demo' | 'rehearsal' | 'own' | 'blank'>}
 * @throws {StartFailure} if it cannot be reached or holds somebody else's tables
 */
export async function readInstanceKind(url) {
	const { default: postgres } = await import('postgres');
	const sql = postgres(url, { max: 1, connect_timeout: 10, onnotice: () => {} });
	try {
		const [{ there }] = await sql`select to_regclass('public.instance') is not null as there`;
		const rows = there ? await sql`select kind from public.instance` : [];
		if (rows[0]) return rows[0].kind;
		await refuseForeignTables(sql);
		return 'blank';
	} catch (error) {
		if (error instanceof StartFailure) throw error;
		throw cannotConnect(url, error);
	} finally {
		await sql.end({ timeout: 2 });
	}
}

async function refuseForeignTables(sql) {
	const [{ migrated }] = await sql`select to_regnamespace('drizzle') is not null as migrated`;
	if (migrated) return;
	const found = await sql`select tablename from pg_tables where schemaname = 'public' limit 1`;
	if (found.length === 0) return;
	throw new StartFailure(
		`The database of DATABASE_URL holds tables that are not Ovalry's (${found[0].tablename}).`,
		['Make an empty database for Ovalry (createdb ovalry) and name that one.']
	);
}

function cannotConnect(url, error) {
	const { hostname, port, pathname, username } = new URL(url);
	return new StartFailure(
		`DATABASE_URL: no connection to ${hostname}:${port || 5432}${pathname} as ${username}: ${error.message}`,
		'Check that the server runs, the database exists and the password is right.'
	);
}

/**
 * Which variant fits the database and what was asked for.
 *
 * @param {'demo' | 'rehearsal' | 'own' | 'blank'} kind
 * @param {'demo' | 'rehearsal' | 'own' | null} asked
 */
export function chooseVariant(kind, asked) {
	if (kind === 'blank') return asked ?? 'own';
	if (!asked || asked === kind) return kind;
	const words = { demo: 'the demo', rehearsal: 'a rehearsal', own: "a lab's own work" };
	const reason =
		asked === 'own'
			? 'A demo or rehearsal never becomes a real lab.'
			: 'The demo runs only on a database that its seed made.';
	throw new StartFailure(
		`The database of DATABASE_URL was made for ${words[kind]}, not for ${words[asked]}.`,
		[reason, 'Name another, empty database, or leave the option away.']
	);
}
