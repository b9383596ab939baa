import { existsSync } from 'node:fs';
import { findProgram, requirePackages } from '../start/debian-packages.mjs';
import { findPostgres } from '../start/find-postgres.mjs';

const databaseTiers = ['integration', 'blinding', 'e2e', 'pages', 'start'];

export const needsCluster = (tiers) =>
	tiers.some((tier) => ['integration', 'blinding', 'e2e', 'pages'].includes(tier));
export const needsBuild = (tiers) => tiers.some((tier) => databaseTiers.includes(tier));

/** Debian packages that the chosen tiers need. */
export async function requireTestPackages(tiers, context) {
	const wanted = [];
	if (tiers.some((tier) => databaseTiers.includes(tier))) wanted.push(postgres);
	if (tiers.includes('e2e') || tiers.includes('pages')) wanted.push(chromium);
	if (tiers.includes('e2e') || tiers.includes('integration')) wanted.push(jwcrypto);
	await requirePackages(wanted, context);
}

const postgres = {
	name: 'postgresql',
	what: 'PostgreSQL',
	isThere: () => findPostgres({ given: process.env.OVALRY_POSTGRES_BIN }).length > 0
};

const chromium = {
	name: 'chromium',
	what: 'Chromium',
	isThere: () => findProgram('chromium') !== null
};

/** The rig's example in Python opens a bundle with it; found by its place, as Debian's own Python sees it. */
const jwcrypto = {
	name: 'python3-jwcrypto',
	what: "Python's jwcrypto",
	isThere: () => existsSync('/usr/lib/python3/dist-packages/jwcrypto')
};
