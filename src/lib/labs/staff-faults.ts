/** Why staff could not be entered, and how to mend it. */
export const staffFaults = {
	'no-such-staff': 'They are not in the list any more.',
	'no-such-member': 'This member has left the lab. Choose another, or nobody.',
	'member-taken': 'This member is in the staff already, further up.'
} as const;
