import { execFileSync, spawnSync } from 'node:child_process';
import { findProgram } from './debian-packages.mjs';
import { StartFailure } from './failure.mjs';

/**
 * Under which accounts the programs run. As root neither PostgreSQL (which refuses it) nor the
 * application runs as root: PostgreSQL gets Debian's account `postgres`, the application `ovalry`.
 *
 * @param {{ isRoot: boolean, say: (line: string) => void, needsDatabase: boolean }} options
 * @returns {{ database: object, application: object }} empty objects mean: the caller's own account
 */
export function chooseAccounts({ isRoot, say, needsDatabase }) {
	if (!isRoot) return { database: {}, application: {} };
	const database = needsDatabase ? requireAccount('postgres') : {};
	if (!lookUp('ovalry')) makeAccount('ovalry', say);
	return { database, application: requireAccount('ovalry') };
}

/** Can this account reach a path? Asked as that account, so that every folder above counts. */
export function canReach(path, account, how = '-r') {
	return spawnSync('test', [how, path], { ...account, cwd: '/' }).status === 0;
}

function requireAccount(name) {
	const account = lookUp(name);
	if (account) return account;
	throw new StartFailure(`This computer has no account ${name}, and as root Ovalry needs it.`, [
		`Make one: useradd --system --user-group --shell /usr/sbin/nologin ${name}`,
		'or start Ovalry as an ordinary user.'
	]);
}

function makeAccount(name, say) {
	if (!findProgram('useradd')) return;
	say(`Making the account ${name}, which may do nothing but run Ovalry`);
	const words = ['--system', '--user-group', '--no-create-home', '--home-dir', '/nonexistent'];
	spawnSync('useradd', [...words, '--shell', '/usr/sbin/nologin', name]);
}

function lookUp(name) {
	try {
		const id = (option) =>
			Number(execFileSync('id', [option, name], { encoding: 'utf8', stdio: 'pipe' }));
		return { uid: id('-u'), gid: id('-g') };
	} catch {
		return null;
	}
}
