import { isAllowed, type Permission, type Standing } from './permissions';

/** The sections of a study in the order of its life; a role sees only its own. */
const sections: { path: string; label: string; permission: Permission }[] = [
	{ path: 'today', label: 'Today', permission: 'today:read' },
	{ path: 'task', label: 'Task', permission: 'task:read' },
	{ path: 'protocol', label: 'Protocol', permission: 'protocol:read' },
	{ path: 'power', label: 'Power', permission: 'power:read' },
	{ path: 'allocation', label: 'Allocation', permission: 'allocation:read' },
	{ path: 'people', label: 'People', permission: 'participant:list' },
	{ path: 'calendar', label: 'Calendar', permission: 'booking:read' },
	{ path: 'messages', label: 'Messages', permission: 'message:read' },
	{ path: 'visits', label: 'Visits', permission: 'visit:run' },
	{ path: 'decisions', label: 'Decisions', permission: 'decision:read' },
	{ path: 'team', label: 'Team', permission: 'team:read' },
	{ path: 'record', label: 'Record', permission: 'record:read' }
];

export type Section = { href: string; label: string };

/** The pages of a lab, in the order in which a lab is set up. */
const labPages: { path: string; label: string; permission: Permission }[] = [
	{ path: '', label: 'Lab', permission: 'lab:read' },
	{ path: '/rigs', label: 'Rooms and rigs', permission: 'lab:read' },
	{ path: '/staff', label: 'Staff', permission: 'lab:read' },
	{ path: '/holidays', label: 'Holidays', permission: 'lab:read' },
	{ path: '/tasks', label: 'Tasks', permission: 'lab:read' },
	{ path: '/members', label: 'Members', permission: 'lab:manage' }
];

/** The pages of a lab that somebody of this standing may open, after the list of studies. */
export function findLabPages(labId: string, standing: Standing): Section[] {
	const pages = labPages
		.filter((page) => isAllowed(page.permission, standing))
		.map(({ path, label }) => ({ href: `/lab/${labId}${path}`, label }));
	return [{ href: '/home', label: 'Studies' }, ...pages];
}

/** The sections that somebody of this standing may open, with their addresses. */
export function findSections(studyId: string, standing: Standing): Section[] {
	return sections
		.filter((section) => isAllowed(section.permission, standing))
		.map(({ path, label }) => ({ href: `/studies/${studyId}/${path}`, label }));
}
