import { StartFailure } from './failure.mjs';

const usage = [
	'npm start                    the demo, on a database of its own',
	'npm start -- --fresh         the demo, made anew',
	'npm start -- --empty         your own lab, on an empty database',
	'npm start -- --rehearse      an empty lab with the demo clock and the local mailbox, to try things out'
];

/**
 * @param {string[]} words what stands behind `npm start --`
 * @returns {{ variant: 'demo' | 'rehearsal' | 'own' | null, fresh: boolean, help: boolean }}
 * @throws {StartFailure} for a word that means nothing, or two that exclude each other
 */
export function readArguments(words) {
	const variants = { '--demo': 'demo', '--rehearse': 'rehearsal', '--empty': 'own' };
	const unknown = words.filter(
		(word) => !(word in variants) && !['--fresh', '--help'].includes(word)
	);
	if (unknown.length > 0) throw new StartFailure(`"${unknown[0]}" means nothing to start.`, usage);
	const chosen = [...new Set(words.filter((word) => word in variants))];
	if (chosen.length > 1)
		throw new StartFailure(`${chosen.join(' and ')} exclude each other.`, usage);
	const fresh = words.includes('--fresh');
	if (fresh && chosen[0] === '--empty') throw freshOwn();
	return { variant: variants[chosen[0] ?? ''] ?? null, fresh, help: words.includes('--help') };
}

/** What `npm start -- --help` prints. */
export function helpText(settings) {
	const width = Math.max(...Object.keys(settings).map((name) => name.length)) + 2;
	const lines = Object.entries(settings).map(([name, what]) => `  ${name.padEnd(width)}${what}`);
	return [...usage, '', 'Settings, given as environment variables:', ...lines].join('\n');
}

function freshOwn() {
	return new StartFailure(
		"--fresh would erase your lab's own database, so it works for the demo only.",
		[
			'To begin again with an empty lab, choose another data folder: OVALRY_DATA=/path npm start -- --empty'
		]
	);
}
