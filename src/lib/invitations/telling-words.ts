const TELLING = [
	'adaptive(?:ly)?',
	'allocat(?:ed|ion)',
	'arms?',
	'blind(?:ed|ing)?',
	'conditions?',
	'control(?:s| group)?',
	'experimental',
	'fixed',
	'groups?',
	'(?:left|right)[ -](?:hand|side|leg|foot)',
	'patients?',
	'penali[sz]ed',
	'perturb(?:ed|ation)s?',
	'placebo',
	'randomi[sz](?:ed|ation)',
	'sham',
	'stroke',
	'target shift',
	'treatment',
	'yoked?'
];
const PATTERN = new RegExp(`\\b(?:${TELLING.join('|')})\\b`, 'giu');

/**
 * Words that would tell a participant, or whoever looks over their shoulder at a mail or a
 * calendar, how the study is built, what they were given or what they have.
 *
 * Used for public titles when they are typed, and by tests over everything a mail shows outside
 * its body.
 * @param workingTitle never to be shown to participants; found as a whole, in any case
 */
export function findTellingWords(text: string, workingTitle = ''): string[] {
	const found = [...text.matchAll(PATTERN)].map((match) => match[0].toLowerCase());
	const secret = workingTitle.trim().toLowerCase();
	if (secret !== '' && text.toLowerCase().includes(secret)) found.push(workingTitle.trim());
	return [...new Set(found)];
}
