/** What of a block its length depends on; a number that is not typed yet is null. */
export type TimedBlock = {
	purpose: string;
	trials: number | null;
	restMinutes?: number | null | undefined;
	restBetweenTrialsSeconds?: number | null | undefined;
	restAfterMinutes?: number | null | undefined;
};

/**
 * How long a block takes, without the rest after it; null while it cannot be told.
 *
 * Units: minutes; `trialSeconds` is one trial with everything that belongs to it.
 */
export function blockMinutes(block: TimedBlock, trialSeconds: number | null): number | null {
	if (block.purpose === 'rest') return block.restMinutes ?? null;
	if (block.trials === null || trialSeconds === null) return null;
	const rests = Math.max(0, block.trials - 1) * (block.restBetweenTrialsSeconds ?? 0);
	return (block.trials * trialSeconds + rests) / 60;
}

export type RigTime = { setupMinutes: number; trialMinutes: number; restMinutes: number };

/** What a visit takes at the rig by its blocks; what cannot be told counts 0. The last rest is none. */
export function rigTime(
	setupMinutes: number | null,
	blocks: readonly TimedBlock[],
	trialSeconds: number | null
): RigTime {
	const time = { setupMinutes: setupMinutes ?? 0, trialMinutes: 0, restMinutes: 0 };
	blocks.forEach((block, index) => {
		const minutes = blockMinutes(block, trialSeconds) ?? 0;
		if (block.purpose === 'rest') time.restMinutes += minutes;
		else time.trialMinutes += minutes;
		if (index < blocks.length - 1) time.restMinutes += block.restAfterMinutes ?? 0;
	});
	return time;
}

export function totalMinutes({ setupMinutes, trialMinutes, restMinutes }: RigTime): number {
	return Math.round(setupMinutes + trialMinutes + restMinutes);
}
