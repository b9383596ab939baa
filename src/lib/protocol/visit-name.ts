/** The name of a visit on screen; its place while it has none. */
export function visitName(visit: { label: string }, index: number): string {
	return visit.label.trim() || `Visit ${index + 1}`;
}

type WithBlocks = {
	blocks: readonly { trials: number | null }[];
	armBlocks?: Readonly<Record<string, readonly { trials: number | null }[]>> | undefined;
};

/** All trials of a visit; where arms differ, those of the arm with the most. */
export function countTrials({ blocks, armBlocks = {} }: WithBlocks): number {
	const lists = [blocks, ...Object.values(armBlocks)];
	return Math.max(...lists.map((list) => list.reduce((sum, { trials }) => sum + (trials ?? 0), 0)));
}
