import type { DeadEnd } from '$scheduler/design/dry-run/dry-settings';

/** Dead ends with the same cause at the same place, and who ran into them. */
export interface DeadEndGroup extends Omit<DeadEnd, 'person'> {
	readonly key: string;
	readonly people: readonly string[];
}

/** The same dead end of several people is one thing to mend; those that stop most people come first. */
export function groupDeadEnds(deadEnds: readonly DeadEnd[]): DeadEndGroup[] {
	const groups = new Map<string, { first: DeadEnd; people: Set<string> }>();
	for (const one of deadEnds) {
		// What the protocol leaves out is one gap, wherever it is met.
		const isEverywhere = one.code === 'nothing-declared';
		const key = isEverywhere ? one.code : `${one.code} ${one.visit ?? 0} ${one.arm}`;
		const known = groups.get(key);
		if (known) known.people.add(one.person);
		else groups.set(key, { first: one, people: new Set([one.person]) });
	}
	return [...groups]
		.map(([key, { first, people }]) => ({ ...first, key, people: [...people].sort() }))
		.sort((a, b) => b.people.length - a.people.length || (a.visit ?? 0) - (b.visit ?? 0));
}

/** What each kind of dead end is called. */
export const deadEndWords: Readonly<Record<DeadEnd['code'], string>> = {
	'no-chain': 'no chain of visits',
	'no-rebooking': 'a missed day cannot be made up',
	'nothing-declared': 'nothing is declared',
	'no-master': 'nobody to follow',
	'master-behind': 'the master is behind',
	'not-ready': 'a decision is not ready',
	'day-full': 'the day is full',
	'over-time': 'the visit is too short',
	'cannot-run': 'a block cannot run'
};
