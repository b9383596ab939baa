/** The name of a visit on screen; its place while it has none. */
export function visitName(visit: { label: string }, index: number): string {
	return visit.label.trim() || `Visit ${index + 1}`;
}

/** All trials of a visit. */
export function countTrials(visit: { blocks: readonly { trials: number | null }[] }): number {
	return visit.blocks.reduce((sum, { trials }) => sum + (trials ?? 0), 0);
}
