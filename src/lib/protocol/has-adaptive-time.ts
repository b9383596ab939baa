type Visits = { visits: readonly { blocks: readonly { purpose: string }[] }[] };

/** Whether any block of a draft or a version is left to the scheduler. */
export function hasAdaptiveTime({ visits }: Visits): boolean {
	return visits.some(({ blocks }) => blocks.some(({ purpose }) => purpose === 'adaptive'));
}
