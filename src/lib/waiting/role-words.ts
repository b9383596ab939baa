/** Roles in a sentence: "the step of the statistician". */
export const roleWords = {
	investigator: 'the investigator',
	coordinator: 'the coordinator',
	operator: 'the operator',
	statistician: 'the statistician',
	'unblinded-statistician': 'the unblinded statistician',
	approver: 'the approver',
	monitor: 'the monitor'
} as const;
