import { existsSync, readFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { StartFailure } from './failure.mjs';
import { oldestMajor } from './find-postgres.mjs';

/**
 * Picks the PostgreSQL programs for a data folder: those of the version that made it, or the newest.
 *
 * @param {string} folder the cluster's folder, which need not exist yet
 * @param {{ major: number, bin: string }[]} found
 */
export function choosePostgres(folder, found) {
	const file = join(folder, 'PG_VERSION');
	if (!existsSync(file)) {
		const newest = found[0];
		if (newest && newest.major >= oldestMajor) return newest;
		throw new StartFailure(
			`Ovalry needs PostgreSQL ${oldestMajor} or newer; here is ${newest?.major}.`,
			[
				`Install a newer one (apt-get install postgresql-${oldestMajor}), or say where it is with`,
				'OVALRY_POSTGRES_BIN, or use another server with DATABASE_URL.'
			]
		);
	}
	const major = Number(readFileSync(file, 'utf8').trim());
	const fitting = found.find((one) => one.major === major);
	if (fitting) return fitting;
	throw otherMajor(
		folder,
		major,
		found.map((one) => one.major)
	);
}

function otherMajor(folder, major, there) {
	return new StartFailure(
		`The data folder ${dirname(folder)} was made by PostgreSQL ${major}; this computer has ${there.join(', ')}.`,
		[
			`Install that version beside the other: apt-get install postgresql-${major}`,
			`or bring the data over with pg_upgrade (old cluster: ${folder}),`,
			'or leave it alone and begin a new one: OVALRY_DATA=/another/folder npm start'
		]
	);
}
