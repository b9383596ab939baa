import type { FEEDBACKS } from '$scheduler/policies/obligation-settings';

/** What a person sees of the result of a trial, as a list of choices says it. */
export const feedbackWords: Record<(typeof FEEDBACKS)[number], string> = {
	shown: 'the result',
	hidden: 'nothing of the result',
	'clamped-to-zero': 'no error, whatever they do',
	'clamped-to-noise': 'their own spread, whatever they do'
};
