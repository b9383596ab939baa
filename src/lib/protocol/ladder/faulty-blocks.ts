import type { Fault } from '../fault';

/** Which blocks need mending, by their list: 'visits.3.blocks' or 'visits.3.armBlocks.fixed'. */
export function groupFaultyBlocks(faults: readonly Fault[]): Map<string, Set<number>> {
	const found = new Map<string, Set<number>>();
	for (const { field, level } of faults) {
		const [, list, block] =
			/^(visits\.\d+\.(?:blocks|armBlocks\.[^.]+))\.(\d+)(?:\.|$)/.exec(field) ?? [];
		if (level !== 'fault' || !list) continue;
		found.set(list, (found.get(list) ?? new Set()).add(Number(block)));
	}
	return found;
}
