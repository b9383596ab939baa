import { expect, test } from 'vitest';
import { studyRoles } from '$lib/server/db/schema';
import { isAllowed, permissions, type Permission } from './permissions';
import { seesArms } from './visibility';

const names = Object.keys(permissions) as Permission[];
const nobody = { isMember: true, isSteward: false, roles: [] };

test('a member without roles may do nothing in a study', () => {
	const allowed = names.filter(
		(name) => permissions[name].scope === 'study' && isAllowed(name, nobody)
	);
	expect(allowed).toEqual([]);
});

test('somebody who left may do nothing but look after their own account', () => {
	const gone = { isMember: false, isSteward: true, roles: [...studyRoles] };
	expect(names.filter((name) => isAllowed(name, gone))).toEqual(['home:read', 'account:manage']);
});

test('a steward without a role reaches a study’s team and record, and nothing else of it', () => {
	const steward = { ...nobody, isSteward: true };
	const allowed = names.filter(
		(name) => permissions[name].scope === 'study' && isAllowed(name, steward)
	);
	expect(allowed.toSorted()).toEqual(['record:read', 'role:confirm', 'role:give', 'team:read']);
});

test('whoever waits for a second person may see the team and confirm others', () => {
	const waiting = { ...nobody, waitingRoles: ['approver'] as const };
	const allowed = names.filter(
		(name) => permissions[name].scope === 'study' && isAllowed(name, waiting)
	);
	expect(allowed.toSorted()).toEqual(['role:confirm', 'team:read']);
});

test('no blinded role may read or settle a decision, or read or seal an allocation', () => {
	const guarded: Permission[] = [
		'decision:read',
		'decision:settle',
		'decision:replay',
		'allocation:read',
		'allocation:seal'
	];
	for (const role of studyRoles.filter((name) => !seesArms(name))) {
		for (const name of guarded) {
			expect([role, name, isAllowed(name, { ...nobody, roles: [role] })]).toEqual([
				role,
				name,
				false
			]);
		}
	}
});
