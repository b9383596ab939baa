/** What each role of a study is called and what it does there, in the order of a study's life. */
export const roleNames = {
	investigator: {
		label: 'Investigator',
		does: 'designs the study: task, protocol, policies; sees counts only while it runs'
	},
	statistician: {
		label: 'Statistician',
		does: 'checks power and signs the protocol; sees data without arms'
	},
	'unblinded-statistician': {
		label: 'Unblinded statistician',
		does: 'seals the allocation and looks at interim results; sees arms'
	},
	coordinator: {
		label: 'Coordinator',
		does: 'enrols people, records consent, books and invites; sees no arms'
	},
	operator: {
		label: 'Operator',
		does: 'runs visits and uploads trials; sees no arms'
	},
	approver: {
		label: 'Approver',
		does: 'settles what the rule may not decide alone; sees arms'
	},
	monitor: {
		label: 'Monitor',
		does: 'watches conduct and safety from outside; may pause the study'
	}
} as const satisfies Record<string, { label: string; does: string }>;

export type RoleName = keyof typeof roleNames;
export const roleOrder = Object.keys(roleNames) as RoleName[];

/** 'coordinator', 'unblinded statistician': the role inside a sentence. */
export function roleInSentence(role: RoleName): string {
	return roleNames[role].label.toLowerCase();
}

/** 'an approver', 'a coordinator'. */
export function roleWithArticle(role: RoleName): string {
	const name = roleInSentence(role);
	return `${/^[aeiou]/.test(name) ? 'an' : 'a'} ${name}`;
}
