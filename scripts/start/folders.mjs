import { createHash } from 'node:crypto';
import { chmodSync, chownSync, existsSync, mkdirSync, realpathSync, statSync } from 'node:fs';
import { join } from 'node:path';
import { canReach } from './accounts.mjs';
import { StartFailure } from './failure.mjs';

/**
 * Chooses and makes the folder that holds the cluster, the secrets, the keys and the mailbox. As
 * root it must be reachable for two other accounts; where the wished folder is not (a checkout in
 * root's own home), it goes to /var/lib/ovalry, under a name made from the wished one.
 *
 * @param {string} wished
 * @param {{ database: object, application: object }} accounts
 */
export function makeHome(wished, accounts) {
	makeFolder(wished);
	const real = realpathSync(wished);
	if (!accounts.application.uid) return requireWritable(real);
	openToPass(real);
	const all = [accounts.database, accounts.application].filter(
		(account) => account.uid !== undefined
	);
	if (all.every((account) => canReach(real, account, '-x'))) return real;
	const name = createHash('sha256').update(real).digest('hex').slice(0, 12);
	const home = join('/var/lib/ovalry', name);
	makeFolder(home);
	return home;
}

/** A folder inside the home that belongs to one account and nobody else may look into. */
export function makePrivateFolder(path, account) {
	makeFolder(path, 0o700);
	chmodSync(path, 0o700);
	if (account.uid !== undefined) chownSync(path, account.uid, account.gid);
	return path;
}

function makeFolder(path, mode = 0o755) {
	try {
		if (existsSync(path) && !statSync(path).isDirectory()) throw notFolder(path);
		mkdirSync(path, { recursive: true, mode });
	} catch (error) {
		if (['EACCES', 'EPERM', 'EROFS'].includes(error.code)) throw notWritable(path);
		if (error.code === 'ENOTDIR') throw notFolder(path);
		throw error;
	}
}

function requireWritable(path) {
	if (canReach(path, {}, '-w') && canReach(path, {}, '-x')) return path;
	throw notWritable(path);
}

/** Others may pass through, not look around: what lies inside is closed for itself. */
function openToPass(path) {
	const mode = statSync(path).mode & 0o7777;
	if ((mode & 0o011) !== 0o011) chmodSync(path, mode | 0o011);
}

function notWritable(path) {
	return new StartFailure(`You may not write in the data folder ${path}.`, [
		'It may have been made by another account, root for instance. Start as that account, or choose a',
		'folder of your own: OVALRY_DATA=$HOME/ovalry-data npm start'
	]);
}

function notFolder(path) {
	return new StartFailure(`The data folder ${path} is a file, or lies below one.`, [
		'Choose another folder with OVALRY_DATA.'
	]);
}
