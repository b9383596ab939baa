import { config } from './config';
import { openDatabase, type DatabaseHandle } from './db/client';
import { mailSettingOf, type MailSetting } from './invitations/mail-setting';
import { openJobs, type Jobs } from './jobs/open-jobs';
import { createPeopleKeys, type PeopleKeys } from './keys/people-keys';
import { loadSigningKey, type SigningKey } from './keys/signing-key';

/** What one process holds open: made at first use, closed at the end. */
let database: DatabaseHandle | undefined;
let jobs: Promise<Jobs> | undefined;
let keys: PeopleKeys | undefined;

export function runtimeDatabase(): DatabaseHandle['db'] {
	database ??= openDatabase(config().DATABASE_URL);
	return database.db;
}

export function runtimeJobs(): Promise<Jobs> {
	jobs ??= openJobs(config().DATABASE_URL);
	return jobs;
}

export function runtimeKeys(): PeopleKeys {
	const { OVALRY_KEYS: folder, OVALRY_WRAPPING_KEY: wrappingKey } = config();
	keys ??= createPeopleKeys({ folder, wrappingKey });
	return keys;
}

/** The key that signs what this server issues to rigs. */
export function runtimeSigningKey(): Promise<SigningKey> {
	const { OVALRY_KEYS: folder, OVALRY_WRAPPING_KEY: wrappingKey } = config();
	return loadSigningKey({ folder, wrappingKey });
}

/** What writing to participants needs. */
export function runtimeMail(): MailSetting {
	return mailSettingOf(config(), runtimeKeys());
}

export async function closeRuntime(): Promise<void> {
	if (jobs) await (await jobs).stop();
	await database?.end();
	database = undefined;
	jobs = undefined;
}
