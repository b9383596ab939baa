import type { Grant } from '$lib/server/access/require-permission';

/** How blocks are chosen is told to those who may know block parameters at least by design. */
export function mayReadRule(grant: Grant): boolean {
	const levels = grant.sees('block-parameters');
	return levels.has('design') || levels.has('yes');
}
