import type { StudyRole } from '$lib/server/db/schema';

/**
 * Who may do what: the one table behind routes, navigation and tests.
 *
 * `person`: anybody signed in. `lab`: members of the lab in the address. `study`: people with one of
 * `roles` in the study in the address (any role when `roles` is 'any'); `steward: true` lets the
 * lab's steward in as well, `waiting: true` those whose role waits for its second person.
 */
type Rule =
	| { scope: 'person' }
	| { scope: 'lab'; stewardOnly: boolean }
	| {
			scope: 'study';
			roles: readonly StudyRole[] | 'any';
			steward?: boolean;
			waiting?: boolean;
	  };

const study = (...roles: StudyRole[]) => ({ scope: 'study', roles }) as const;

export const permissions = {
	'home:read': { scope: 'person' },
	'account:manage': { scope: 'person' },

	'lab:read': { scope: 'lab', stewardOnly: false },
	'lab:manage': { scope: 'lab', stewardOnly: true },
	'study:create': { scope: 'lab', stewardOnly: false },
	'lab-task:keep': { scope: 'lab', stewardOnly: false },

	'study:read': { scope: 'study', roles: 'any' },
	'today:read': { scope: 'study', roles: 'any' },
	'team:read': { scope: 'study', roles: 'any', steward: true, waiting: true },
	'role:give': { scope: 'study', roles: [], steward: true },
	// Whoever is neither giver nor receiver: three people can confirm each other.
	'role:confirm': { scope: 'study', roles: 'any', steward: true, waiting: true },
	'study:pause': { scope: 'study', roles: 'any' },
	'pause:lift': { scope: 'study', roles: 'any' },

	'task:read': study('investigator', 'statistician'),
	'protocol:read': { scope: 'study', roles: 'any' },
	'protocol:edit': study('investigator'),
	// The whole document, the rule included: not for roles that must not know it.
	'protocol:export': study(
		'investigator',
		'statistician',
		'unblinded-statistician',
		'approver',
		'monitor'
	),
	'comment:write': study('investigator', 'statistician', 'coordinator', 'monitor', 'approver'),
	'protocol:freeze': study('investigator'),
	// Who designs the rule tries it; blinded roles see settings, never what a person got.
	'protocol:rehearse': study('investigator', 'statistician'),
	'ethics:record': study('investigator'),
	// A letter may say what is done to the task: not for roles that must not know it.
	'ethics:read': study(
		'investigator',
		'statistician',
		'unblinded-statistician',
		'approver',
		'monitor'
	),

	'power:read': study('investigator', 'statistician', 'unblinded-statistician'),
	'power:sign': study('statistician'),

	'allocation:read': study('unblinded-statistician'),
	'allocation:seal': study('unblinded-statistician'),

	'participant:list': study('coordinator'),
	'participant:enrol': study('coordinator'),
	'participant:withdraw': study('coordinator'),
	'consent:record': study('coordinator'),

	'booking:read': study('coordinator'),
	'booking:change': study('coordinator'),
	'attendance:record': study('coordinator'),
	'message:read': study('coordinator'),

	'visit:run': study('operator'),
	'trials:upload': study('operator'),
	'bundle:fetch': study('operator'),

	'decision:count': study('investigator', 'monitor'),
	'decision:read': study('approver', 'unblinded-statistician'),
	'decision:settle': study('approver'),
	'decision:replay': study('approver', 'unblinded-statistician'),

	'record:read': { scope: 'study', roles: 'any', steward: true }
} as const satisfies Record<string, Rule>;

export type Permission = keyof typeof permissions;

export type Standing = {
	isMember: boolean;
	isSteward: boolean;
	roles: readonly StudyRole[];
	/** Roles given but not yet confirmed by a second person. */
	waitingRoles?: readonly StudyRole[];
};

/** Whether somebody of this standing in the lab and study may do it. */
export function isAllowed(permission: Permission, standing: Standing): boolean {
	const rule: Rule = permissions[permission];
	if (rule.scope === 'person') return true;
	if (!standing.isMember) return false;
	if (rule.scope === 'lab') return standing.isSteward || !rule.stewardOnly;
	if (rule.steward && standing.isSteward) return true;
	if (rule.waiting && (standing.waitingRoles ?? []).length > 0) return true;
	if (rule.roles === 'any') return standing.roles.length > 0;
	return rule.roles.some((role) => standing.roles.includes(role));
}
