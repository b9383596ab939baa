import postgres from 'postgres';

/** A PostgreSQL server for tests, with the template that every test database is made from. */
export type TestCluster = {
	/** The superuser's address of the database `postgres`. */
	adminUrl: string;
	/** Name of a database with all migrations and nothing in it. */
	template: string;
	/** A folder for what belongs to templates; goes away with the test run. */
	files: string;
	appPassword: string;
	researchPassword: string;
};

declare module 'vitest' {
	export interface ProvidedContext {
		testCluster: TestCluster;
	}
}

/** Address of a database on the cluster, as one of the three roles. */
export function urlOf(
	cluster: TestCluster,
	database: string,
	role: DatabaseRole = 'owner'
): string {
	const url = new URL(cluster.adminUrl);
	url.pathname = `/${database}`;
	if (role === 'owner') return url.href;
	url.username = role === 'app' ? 'ovalry_app' : 'ovalry_research';
	url.password = role === 'app' ? cluster.appPassword : cluster.researchPassword;
	return url.href;
}

export type DatabaseRole = 'owner' | 'app' | 'research';

/** Runs statements on the cluster's database `postgres`, as its superuser. */
export async function onCluster<T>(
	cluster: TestCluster,
	work: (sql: postgres.Sql) => Promise<T>
): Promise<T> {
	const sql = postgres(cluster.adminUrl, { max: 1, onnotice: () => {} });
	try {
		return await work(sql);
	} finally {
		await sql.end({ timeout: 2 });
	}
}
