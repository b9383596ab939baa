/** How much of what was learned is kept over hours without practice. */
export type Forgetting =
	| {
			readonly kind: 'exponential';
			/** Hours until 63 % of what can be lost is lost. */
			readonly timeConstantHours: number;
			/** Share that is never lost. */
			readonly floor: number;
	  }
	| {
			readonly kind: 'power';
			readonly timeScaleHours: number;
			readonly exponent: number;
	  };

/**
 * Share of an adaptation that is kept over a gap.
 *
 * Units:   hours in, share out.
 * Method:  floor + (1 − floor)·e^(−Δh/τ), or (1 + Δh/h₀)^(−g).
 * Source:  method sheet C (Time); its defaults are assumptions, no data stand behind them.
 * @throws {RangeError} a negative gap, or a time scale that is not positive
 * @example computeRetainedShare({ kind: 'exponential', timeConstantHours: 120, floor: 0.2 }, 24) // 0.855
 */
export function computeRetainedShare(forgetting: Forgetting, gapHours: number): number {
	if (!(gapHours >= 0)) throw new RangeError(`a gap cannot be ${gapHours} hours`);
	if (forgetting.kind === 'exponential') {
		const { timeConstantHours, floor } = forgetting;
		if (!(timeConstantHours > 0)) throw new RangeError('the time constant must be positive');
		return floor + (1 - floor) * Math.exp(-gapHours / timeConstantHours);
	}
	const { timeScaleHours, exponent } = forgetting;
	if (!(timeScaleHours > 0)) throw new RangeError('the time scale must be positive');
	return (1 + gapHours / timeScaleHours) ** -exponent;
}

/** Fast and slow processes of the method sheet: 0.5 and 120 hours, a floor of 0.2 for the slow one. */
export const FORGETTING_DEFAULTS: { readonly fast: Forgetting; readonly slow: Forgetting } = {
	fast: { kind: 'exponential', timeConstantHours: 0.5, floor: 0 },
	slow: { kind: 'exponential', timeConstantHours: 120, floor: 0.2 }
};
