import { randomUUID } from 'node:crypto';
import { requirePermission, type Grant } from '$lib/server/access/require-permission';
import type { Permission } from '$lib/server/access/permissions';
import { createClock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { lab, membership, person, study } from '$lib/server/db/schema';

export type PlantedPerson = {
	id: string;
	name: string;
	email: string;
	/** What `event.locals` holds when they ask for a page. */
	locals: App.Locals;
	grantFor<P extends Permission>(
		permission: P,
		place?: { labId?: string; studyId?: string }
	): Promise<Grant<P>>;
};

/** Somebody who can sign in, a member of a lab when one is given. */
export async function plantPerson(
	db: Database,
	name: string,
	place: { labId?: string; isSteward?: boolean } = {}
): Promise<PlantedPerson> {
	const id = randomUUID();
	const email = `${name.toLowerCase().replace(/[^a-z]+/g, '.')}.${id.slice(0, 8)}@lab.example`;
	await db.insert(person).values({ id, name, email });
	if (place.labId) {
		await db
			.insert(membership)
			.values({ labId: place.labId, personId: id, isSteward: place.isSteward ?? false });
	}
	const locals = {
		db,
		clock: createClock(0),
		person: { id, name, email },
		sessionToken: null,
		instanceKind: 'own',
		path: '/home',
		requestId: 'test'
	} as unknown as App.Locals;
	return {
		id,
		name,
		email,
		locals,
		grantFor: (permission, scope = {}) => requirePermission(locals, permission, scope)
	};
}

/** A lab with nothing in it. */
export async function plantEmptyLab(db: Database, name = 'Fjordview Lab'): Promise<string> {
	const id = randomUUID();
	await db.insert(lab).values({ id, name, zone: 'Europe/Oslo' });
	return id;
}

/** A study in design, without anybody in it. */
export async function plantBareStudy(
	db: Database,
	place: { labId: string; createdBy: string }
): Promise<string> {
	const id = randomUUID();
	await db.insert(study).values({
		id,
		...place,
		workingTitle: 'Puck release under a moving target',
		publicTitle: 'Practising a sliding movement',
		codePrefix: 'TW'
	});
	return id;
}
