import { randomBytes } from 'node:crypto';
import { inject } from 'vitest';
import { onCluster, urlOf, type TestCluster } from './test-cluster';

export type TestDatabase = {
	name: string;
	/** The owner's address: makes and breaks everything; for planting what a test needs. */
	ownerUrl: string;
	/** The application's address: what the product itself may do. */
	appUrl: string;
	/** The address of research queries, which see no contact data. */
	researchUrl: string;
	/** Removes the database, ending whoever is still connected. */
	drop(): Promise<void>;
};

/**
 * A database of its own for one test file, migrated and empty unless another template is named.
 *
 * @example
 * const database = await createDatabase();
 * const { db, end } = openDatabase(database.appUrl);
 */
export async function createDatabase(template?: string): Promise<TestDatabase> {
	const cluster: TestCluster = inject('testCluster');
	const name = `test_${randomBytes(6).toString('hex')}`;
	const from = template ?? cluster.template;
	await onCluster(cluster, (sql) => sql.unsafe(`create database ${name} template ${from}`));
	return {
		name,
		ownerUrl: urlOf(cluster, name, 'owner'),
		appUrl: urlOf(cluster, name, 'app'),
		researchUrl: urlOf(cluster, name, 'research'),
		async drop() {
			await onCluster(cluster, (sql) => sql.unsafe(`drop database if exists ${name} with (force)`));
		}
	};
}
