import { randomUUID } from 'node:crypto';
import { requirePermission, type Grant } from '$lib/server/access/require-permission';
import type { Permission } from '$lib/server/access/permissions';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { membership, person, studyRole, type StudyRole } from '$lib/server/db/schema';
import { createPatternDraft, type PatternName } from '$lib/protocol/patterns';
import type { ProtocolDraft } from '$lib/protocol/protocol-draft';
import { freezeVersion } from '$lib/server/protocols/freeze-version';
import { loadDraft } from '$lib/server/protocols/load-draft';
import { saveDraft } from '$lib/server/protocols/save-draft';
import { createStudy } from '$lib/server/studies/create-study';

export type TeamMember = {
	personId: string;
	grantFor<P extends Permission>(permission: P): Promise<Grant<P>>;
};

/** Somebody who belongs to a lab, without any role yet. */
export async function plantColleague(
	db: Database,
	labId: string,
	name: string
): Promise<{ personId: string; inStudy(studyId: string): TeamMember }> {
	const personId = randomUUID();
	const email = `${personId}@lab.example`;
	await db.insert(person).values({ id: personId, name, email });
	await db.insert(membership).values({ labId, personId });
	const locals = { db, person: { id: personId, name, email }, path: '/' } as App.Locals;
	const inStudy = (studyId: string): TeamMember => ({
		personId,
		grantFor: (permission) => requirePermission(locals, permission, { labId, studyId })
	});
	return { personId, inStudy };
}

type Giving = { studyId: string; personId: string; role: StudyRole; givenBy: string };

/** Gives a role; one that sees arms is confirmed by whoever else there is. */
export async function plantRole(
	db: Database,
	{ confirmedBy, ...giving }: Giving & { confirmedBy?: string }
): Promise<void> {
	const confirmed = confirmedBy ? { confirmedBy, confirmedAt: new Date() } : {};
	await db.insert(studyRole).values({ ...giving, ...confirmed });
}

/** A study created by an investigator through the product's own functions. */
export async function plantNewStudy(
	db: Database,
	clock: Clock,
	options: { labId: string; pattern?: PatternName; codePrefix?: string }
) {
	const { labId, pattern = 'two-arms', codePrefix = 'TW' } = options;
	const colleague = await plantColleague(db, labId, 'Ilse Varga');
	const made = await createStudy(db, clock, await colleague.inStudy('').grantFor('study:create'), {
		workingTitle: 'Puck release under a moving target',
		publicTitle: 'Practising a sliding movement',
		codePrefix,
		phone: '+351 000 000',
		pattern
	});
	if (!made.ok) throw new Error(made.reason);
	return { studyId: made.studyId, investigator: colleague.inStudy(made.studyId) };
}

/** The two-arm pattern with its comparison filled in. */
export function finishedDraft(): ProtocolDraft {
	const draft = createPatternDraft('two-arms');
	Object.assign(draft.comparison, { effectD: 0.8, effectSource: 'pilot', peoplePerArm: 30 });
	return draft;
}

/** Saves a draft over what stands and freezes it. */
export async function freezeDraft(
	db: Database,
	clock: Clock,
	investigator: TeamMember,
	draft: ProtocolDraft
): Promise<{ number: number; hash: string }> {
	const edit = await investigator.grantFor('protocol:edit');
	const loaded = await loadDraft(db, edit);
	if (!loaded) throw new Error('there is no draft');
	const { number, revision } = loaded;
	const saved = await saveDraft(db, edit, { number, revision, draft });
	if (!saved.ok) throw new Error(saved.reason);
	const frozen = await freezeVersion(db, clock, await investigator.grantFor('protocol:freeze'), {
		number,
		revision: saved.revision,
		reason: 'As the team agreed'
	});
	if (!frozen.ok) throw new Error(frozen.reason);
	return frozen;
}
