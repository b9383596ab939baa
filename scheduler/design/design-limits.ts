/** Limits of the checker. A finding stands where a value is worse than its limit; the limit itself passes. */
export const DESIGN_LIMITS = {
	/**
	 * Trials by which two arms may differ in a visit. Dose is part of the treatment, and equal counts cost
	 * nothing to plan. Source: the principle that only what is studied may differ between arms.
	 */
	trialsApart: 0,
	/** The same for rest: seconds after a trial, minutes in and between blocks. Rest is dose, too. */
	restApart: 0,
	/** Hours from the last practice to a retention test. Source: method sheet D1 (retention ≥ 24 h). */
	retentionHours: 24,
	/**
	 * Plain trials between a region and a measure without one: the cool-down of the policy's defaults.
	 * Source: method sheet D0 (cool-down of 40 trials).
	 */
	washoutAfterRegion: 40,
	/** The same after a shift: three times the longest hold. Source: method sheet D1 (washout ≥ 3 × lag). */
	washoutAfterShift: 60,
	/**
	 * Of all pairs of a region and a shift block in fixed arms, the share in which the same kind comes first.
	 * Half is balanced; three quarters is what strict alternation ABAB within one arm gives.
	 */
	sameOrderShare: 0.75,
	/** Chance that a person who does not change is called changed. Source: CALIBRATION.md, goal 5 % a block. */
	falseChange: 0.05,
	/**
	 * First step of a shift in SD of the result; below it more than one person in ten who does not adapt
	 * passes. Source: CALIBRATION.md, shift rule.
	 */
	firstStepSd: 1,
	/** Plain blocks that the shift rule looks back on. Source: method sheet D0 (results of 3 blocks). */
	plainBlocks: 3,
	/** Visits of one person, and hours at the rig, above which a burden asks for a reason. Judgement. */
	visits: 30,
	rigHours: 40
} as const;

/** Numbers are compared with this much give, so that sums of decimals do not differ from themselves. */
export const ROUNDING = 1e-6;
