import { isFunctionName } from '../tasks/formula/formula-functions.ts';
import { readTokens } from '../tasks/formula/read-tokens.ts';

/** Names in a formula that are neither the time nor a function nor pi, in order of appearance. */
export function listParameterNames(formula: string, time: string): string[] {
	const names = readTokens(formula).flatMap((token) => (token.kind === 'name' ? [token.name] : []));
	return [...new Set(names)].filter(
		(name) => name !== time && name !== 'pi' && !isFunctionName(name)
	);
}
