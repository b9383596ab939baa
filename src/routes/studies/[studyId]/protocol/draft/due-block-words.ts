/** Choices of the form of due blocks, in plain words. */

export const obligedKinds = [
	{ value: 'probe', label: 'probe' },
	{ value: 'clamp', label: 'error clamp' },
	{ value: 'washout', label: 'washout' },
	{ value: 'retention', label: 'retention' },
	{ value: 'transfer', label: 'transfer' }
] as const;

export const moments = [
	{ value: 'day-start', label: 'at the start of a visit' },
	{ value: 'day-end', label: 'at the end of a visit' },
	{ value: 'after', label: 'once a challenge has ended' },
	{ value: 'every', label: 'after perturbed blocks' }
] as const;

export const ends = [
	{ value: 'region', label: 'a penalized region' },
	{ value: 'shift', label: 'a target shift' }
] as const;

export const shownFeedback = [
	{ value: 'shown', label: 'the result' },
	{ value: 'hidden', label: 'nothing' },
	{ value: 'clamped-to-zero', label: 'an error of 0, always' },
	{ value: 'clamped-to-noise', label: 'noise of their own spread' }
] as const;
