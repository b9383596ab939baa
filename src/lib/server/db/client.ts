import { drizzle, type PostgresJsDatabase } from 'drizzle-orm/postgres-js';
import postgres from 'postgres';
import * as schema from './schema';

export type Database = PostgresJsDatabase<typeof schema>;
export type Transaction = Parameters<Parameters<Database['transaction']>[0]>[0];
/** A database or a transaction on it: what a feature function takes. */
export type Queryable = Database | Transaction;

export type DatabaseHandle = { db: Database; end(): Promise<void> };

/** Opens a pool of connections. Nothing is connected before the first query. */
export function openDatabase(url: string, options: { max?: number } = {}): DatabaseHandle {
	const client = postgres(url, { max: options.max ?? 10, onnotice: () => {} });
	return { db: drizzle(client, { schema }), end: () => client.end({ timeout: 3 }) };
}
