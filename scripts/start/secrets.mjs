import { randomBytes } from 'node:crypto';
import { existsSync, readFileSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { StartFailure } from './failure.mjs';

const made = {
	ownerPassword: () => randomBytes(24).toString('hex'),
	appPassword: () => randomBytes(24).toString('hex'),
	researchPassword: () => randomBytes(24).toString('hex'),
	authSecret: () => randomBytes(48).toString('base64url'),
	wrappingKey: () => randomBytes(32).toString('base64url'),
	allocationKey: () => randomBytes(32).toString('base64url'),
	signOnSecret: () => randomBytes(24).toString('hex')
};

/**
 * Passwords and keys of this installation, made at the first start and kept beside the cluster
 * whose passwords they are, readable by the starting account only.
 *
 * @param {string} home
 * @returns {Record<keyof typeof made, string>}
 */
export function readSecrets(home) {
	const file = join(home, 'secrets.json');
	const kept = existsSync(file) ? parse(file) : {};
	if (!existsSync(file) && existsSync(join(home, 'cluster'))) throw lost(home);
	const missing = Object.entries(made).filter(([name]) => !kept[name]);
	if (missing.length === 0) return kept;
	const all = { ...kept, ...Object.fromEntries(missing.map(([name, make]) => [name, make()])) };
	writeFileSync(`${file}.new`, `${JSON.stringify(all, null, '\t')}\n`, { mode: 0o600 });
	renameSync(`${file}.new`, file);
	return all;
}

function parse(file) {
	try {
		return JSON.parse(readFileSync(file, 'utf8'));
	} catch {
		throw new StartFailure(`The file ${file} cannot be read; it holds the database's passwords.`, [
			'Put it back from your backup.'
		]);
	}
}

function lost(home) {
	return new StartFailure(
		`There is a database in ${home}, but no secrets.json with its passwords.`,
		[
			'Put secrets.json back from your backup,',
			`or, if nothing in that database matters, remove the folder: rm -r ${home}`
		]
	);
}
