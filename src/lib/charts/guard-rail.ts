export type RailVerdict = 'automatic' | 'held' | 'never';

/** Up to `heldFrom` the rule acts alone; above it a person decides; above `neverFrom` nobody may. */
export function judgeRail(value: number, heldFrom: number, neverFrom: number): RailVerdict {
	if (!(heldFrom <= neverFrom)) throw new RangeError('held must begin before never');
	return value <= heldFrom ? 'automatic' : value <= neverFrom ? 'held' : 'never';
}
