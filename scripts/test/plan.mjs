import { existsSync, statSync } from 'node:fs';
import { join, relative, resolve } from 'node:path';
import { StartFailure } from '../start/failure.mjs';

/** The quick tier, in the order in which it runs: cheap and telling things first. */
export const tiers = ['types', 'unit', 'reference', 'architecture', 'integration', 'e2e'];

/** Tiers with commands of their own, which `npm test` leaves out. */
export const longTiers = ['blinding', 'pages', 'start'];

const places = {
	'tests/reference/': 'reference',
	'tests/architecture/': 'architecture',
	'tests/integration/': 'integration',
	'tests/blinding/': 'blinding',
	'tests/e2e/': 'e2e',
	'tests/pages/': 'pages',
	'tests/start/': 'start'
};

const usage = [
	'npm test                                   everything of the quick tier',
	`npm test -- unit integration               some of ${tiers.join(', ')}`,
	'npm test -- tests/e2e/sign-in.test.ts      one file',
	'npm test -- integration -t "a name"        what is left goes to vitest'
];

/**
 * Which tiers run, with which files and options.
 *
 * @param {string[]} words what stands behind `npm test --`
 * @param {string} checkout
 * @returns {{ tiers: string[], files: string[], rest: string[] }}
 */
export function planTests(words, checkout) {
	const firstOption = words.findIndex((word) => word.startsWith('-'));
	const named = firstOption < 0 ? words : words.slice(0, firstOption);
	const rest = firstOption < 0 ? [] : words.slice(firstOption);
	const chosen = named.filter((word) => [...tiers, ...longTiers].includes(word));
	const files = named
		.filter((word) => !chosen.includes(word))
		.map((word) => nameFile(word, checkout));
	const ofFiles = files.map(tierOf);
	const wanted = new Set([...chosen, ...ofFiles]);
	const all =
		named.length === 0
			? rest.length > 0
				? tiers.slice(1)
				: tiers
			: [...tiers, ...longTiers].filter((tier) => wanted.has(tier));
	return { tiers: all, files, rest };
}

function nameFile(word, checkout) {
	const path = resolve(word);
	if (!existsSync(path)) throw new StartFailure(`There is no test and no tier "${word}".`, usage);
	const name = relative(checkout, path);
	return statSync(join(checkout, name)).isDirectory() ? `${name}/` : name;
}

/** Tests beside the code are unit tests. */
export function tierOf(file) {
	const place = Object.keys(places).find((folder) => file.startsWith(folder));
	return place ? places[place] : 'unit';
}
