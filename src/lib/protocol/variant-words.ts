const words: Record<string, string> = {
	'open-investigator': 'the investigator is not blinded',
	'open-operator': 'rig parameters are set by hand, so the operator may infer the arm',
	'operator-sees-display': 'the operator sees the task display and may infer the arm',
	'small-team': 'one person approves decisions and holds the allocation',
	'feedback-to-participant': 'participants see their own scores',
	pilot: 'people marked pilot are never allocated, counted or pooled'
};

/** What an exception from the usual blinding means, as it is printed in protocol and report. */
export function variantWords(variant: string): string {
	return words[variant] ?? variant.replaceAll('-', ' ');
}
