import type { FindingMark } from '../findings';

/** Numbers of notes in one cell of the ladder, by the block's index; -1: about the whole cell. */
export type CellNotes = ReadonlyMap<number, readonly number[]>;

const none: CellNotes = new Map();

/** Notes by cell, for marks that name a visit; a mark without an arm stands in every arm's cell. */
export function groupMarks(marks: readonly FindingMark[]) {
	const cells = new Map<string, Map<number, number[]>>();
	for (const { number, place } of marks) {
		if (place.visit === undefined) continue;
		const key = `${place.visit - 1} ${place.arm ?? ''}`;
		const cell = cells.get(key) ?? new Map<number, number[]>();
		const block = (place.block ?? 0) - 1;
		cell.set(block, [...(cell.get(block) ?? []), number]);
		cells.set(key, cell);
	}
	return (visit: number, arm: string): CellNotes => {
		const [every, own] = [cells.get(`${visit} `), cells.get(`${visit} ${arm}`)];
		if (!every || !own) return own ?? every ?? none;
		const blocks = new Set([...every.keys(), ...own.keys()]);
		return new Map(
			[...blocks].map((block) => [
				block,
				[...(every.get(block) ?? []), ...(own.get(block) ?? [])].sort((a, b) => a - b)
			])
		);
	};
}
