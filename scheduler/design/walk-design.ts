import { blocksOfArm } from '../protocol/visit-plan.ts';
import type { Design, DesignArm, DesignBlock, DesignVisit } from './design.ts';
import type { DesignPath } from './repair.ts';

/** What one arm does in a visit. `list`: whose list that is; null: the one of every arm. */
export interface ArmVisit {
	readonly arm: DesignArm;
	readonly list: string | null;
	readonly blocks: readonly DesignBlock[];
}

export function listArmVisits(design: Design, visit: DesignVisit): ArmVisit[] {
	return design.arms.map((arm) => ({
		arm,
		list: visit.armBlocks[arm.key] ? arm.key : null,
		blocks: blocksOfArm(visit, arm.key)
	}));
}

/** Every list of a visit that some arm runs, once. */
export function listBlockLists(
	design: Design,
	visit: DesignVisit
): { list: string | null; arms: DesignArm[]; blocks: readonly DesignBlock[] }[] {
	const lists = new Map<string | null, DesignArm[]>();
	for (const { arm, list } of listArmVisits(design, visit)) {
		lists.set(list, [...(lists.get(list) ?? []), arm]);
	}
	return [...lists].map(([list, arms]) => ({
		list,
		arms,
		blocks: list === null ? visit.blocks : (visit.armBlocks[list] ?? [])
	}));
}

/** Where a block stands in the design, as a path. */
export function blockPath(visit: number, list: string | null, block: number): DesignPath {
	return list === null
		? ['visits', visit, 'blocks', block]
		: ['visits', visit, 'armBlocks', list, block];
}

/** Where a list of blocks stands, as the text of a field. */
export function listField(visit: number, list: string | null): string {
	return list === null ? `visits.${visit}.blocks` : `visits.${visit}.armBlocks.${list}`;
}

export const sum = (values: readonly number[]): number =>
	values.reduce((total, value) => total + value, 0);

/** 'Adaptive 240, Fixed and Yoked 238': arms with the same value together. */
export function describeByArm(values: readonly { arm: DesignArm; value: string }[]): string {
	const names = new Map<string, string[]>();
	for (const { arm, value } of values) {
		names.set(value, [...(names.get(value) ?? []), nameArm(arm)]);
	}
	return [...names].map(([value, arms]) => `${joinWords(arms)} ${value}`).join(', ');
}

export function nameArm({ name, key }: DesignArm): string {
	return name.trim() || key;
}

export function joinWords(words: readonly string[]): string {
	return words.length < 2
		? words.join('')
		: `${words.slice(0, -1).join(', ')} and ${words.at(-1) ?? ''}`;
}

/** At most two decimals, as people write numbers. */
export function writeNumber(value: number): string {
	return String(Math.round(value * 100) / 100);
}

/** A count with its noun: '1 trial', '2 trials'. */
export function writeCount(count: number, noun: string): string {
	return `${count} ${noun}${count === 1 ? '' : 's'}`;
}
