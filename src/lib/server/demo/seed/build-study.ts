import { createHash } from 'node:crypto';
import type { ProtocolDraft } from '$lib/protocol/protocol-draft';
import { allocationSeal, signOff, studyRole } from '$lib/server/db/schema';
import { recordApproval } from '$lib/server/ethics/record-approval';
import { sealAllocation } from '$lib/server/keys/allocation-seal';
import { freezeVersion } from '$lib/server/protocols/freeze-version';
import { loadDraft } from '$lib/server/protocols/load-draft';
import { saveDraft } from '$lib/server/protocols/save-draft';
import { startDraft } from '$lib/server/protocols/start-draft';
import { createStudy } from '$lib/server/studies/create-study';
import type { DemoWorld } from './demo-world';
import { team } from './cast';

type Freezing = { change: (draft: ProtocolDraft) => ProtocolDraft; reason: string };

/** Puck release under a moving target, designed and frozen four times; version 4 is the one that runs. */
export async function buildStudy(world: DemoWorld, labId: string, seed: number): Promise<string> {
	const { db, clock } = world;
	const made = await createStudy(
		db,
		clock,
		await world.grant('investigator', 'study:create', { labId }),
		{
			workingTitle: 'Puck release under a moving target',
			publicTitle: 'Practising a sliding movement',
			codePrefix: 'TW',
			phone: '+351 555 0101',
			pattern: 'two-arms'
		}
	);
	if (!made.ok) throw new Error(`the study was not created: ${made.reason}`);
	const { studyId } = made;
	await giveRoles(world, studyId);
	let hash = await freezeWith(world, studyId, { change: designStudy, reason: 'First version.' });
	const later: Freezing[] = [
		{
			change: (draft) => ({ ...draft, readyLeadHours: 3, consentTextVersion: '2' }),
			reason: 'Twelve hours are too early for decisions here; the consent text says what is stored.'
		},
		{
			change: (draft) => ({ ...draft, limits: { ...draft.limits, minutesPerVisit: 60 } }),
			reason: 'The board asked for no more than an hour a visit.'
		},
		{
			change: (draft) => ({ ...draft, consentTextVersion: '3' }),
			reason: 'The board asked for the phone number in the consent text.'
		}
	];
	for (const freezing of later) {
		await startDraft(db, clock, await world.grant('investigator', 'protocol:edit', { studyId }));
		hash = await freezeWith(world, studyId, freezing);
	}
	await openGates(world, studyId, { hash, seed });
	return studyId;
}

/** What the pattern leaves open: two blocks a practice day, regions as the only aim, tight guard rails. */
function designStudy(draft: ProtocolDraft): ProtocolDraft {
	const visits = draft.visits.map((visit) => ({
		...visit,
		minutes: 45,
		blocks: visit.kind === 'retention' ? visit.blocks : visit.blocks.slice(0, 2)
	}));
	return {
		...draft,
		visits,
		aims: {
			...draft.aims,
			region: { isOn: true, share: 1, escapes: 3 },
			shift: { ...draft.aims.shift, isOn: false }
		},
		settle: { minBlocks: 2, maxBlocks: 3 },
		guardRails: { automaticCoverMax: 0.22, automaticReachSdMax: 4 },
		comparison: {
			...draft.comparison,
			effectD: 0.8,
			effectSource: 'published, likely inflated; two studies, 11 a group (invented)',
			peoplePerArm: 8,
			peopleLostShare: 0.1,
			peopleLostSource: '1.5 % before each of 7 visits, the lab’s last study (invented)',
			effectLostShare: 0.15,
			effectLostSource: 'no make-up; effect in share of 6 days attended (invented)'
		}
	};
}

/** Version 5 asks for 30 an arm and waits for the statistician. */
export async function freezeLargerVersion(world: DemoWorld, studyId: string): Promise<void> {
	await startDraft(
		world.db,
		world.clock,
		await world.grant('investigator', 'protocol:edit', { studyId })
	);
	await freezeWith(world, studyId, {
		change: (draft) => ({ ...draft, comparison: { ...draft.comparison, peoplePerArm: 30 } }),
		reason: 'Eight people an arm find too little: 30 an arm, so that an effect of .8 would be seen.'
	});
}

async function freezeWith(
	world: DemoWorld,
	studyId: string,
	{ change, reason }: Freezing
): Promise<string> {
	const { db, clock } = world;
	const edit = await world.grant('investigator', 'protocol:edit', { studyId });
	const loaded = await loadDraft(db, edit);
	if (!loaded) throw new Error('there is no draft to change');
	const { number, revision, draft } = loaded;
	const saved = await saveDraft(db, edit, { number, revision, draft: change(draft) });
	if (!saved.ok) throw new Error(`the draft was not saved: ${saved.reason}`);
	const freeze = await world.grant('investigator', 'protocol:freeze', { studyId });
	const frozen = await freezeVersion(db, clock, freeze, {
		number,
		revision: saved.revision,
		reason
	});
	if (!frozen.ok) throw new Error(`version ${number} was not frozen: ${JSON.stringify(frozen)}`);
	return frozen.hash;
}

/** Roles as two people gave them; those that see arms are confirmed by another. */
async function giveRoles({ db, people, clock }: DemoWorld, studyId: string): Promise<void> {
	const idOf = (key: string) => people.get(key)?.id ?? '';
	const now = new Date(clock.now());
	for (const { key, role } of team) {
		if (role === 'steward' || role === 'investigator') continue;
		const confirmed = role === 'approver' || role === 'unblinded-statistician';
		await db.insert(studyRole).values({
			studyId,
			personId: idOf(key),
			role,
			givenBy: idOf('steward'),
			givenAt: now,
			confirmedBy: confirmed ? idOf('investigator') : null,
			confirmedAt: confirmed ? now : null
		});
	}
}

async function openGates(
	world: DemoWorld,
	studyId: string,
	{ hash, seed }: { hash: string; seed: number }
) {
	const { db, clock, people, settings } = world;
	const at = new Date(clock.now());
	await db.insert(signOff).values({
		studyId,
		protocolHash: hash,
		verdict: 'signed',
		comment: 'Fine as a first study. Power .32 for d = .8 is said in the report.',
		assumptions: {},
		personId: people.get('statistician')?.id ?? '',
		at
	});
	await recordApproval(db, clock, await world.grant('investigator', 'ethics:record', { studyId }), {
		protocolHash: hash,
		board: 'Board of the Invented Quay',
		reference: 'IQ-2027-014',
		approvedOn: '2027-02-19',
		expiresOn: '2027-04-20'
	});
	const part = (name: string) =>
		new Uint8Array(createHash('sha256').update(`demo allocation ${name} ${seed}`).digest());
	const secret = { seed: part('seed'), nonce: part('nonce') };
	const { sealed, commitment } = sealAllocation(settings.OVALRY_ALLOCATION_KEY, studyId, secret);
	await db.insert(allocationSeal).values({
		studyId,
		protocolHash: hash,
		sealedSeed: sealed,
		commitment,
		method: { arms: ['adaptive', 'fixed'], blockSizes: [2, 4] },
		sealedBy: people.get('unblinded')?.id ?? '',
		sealedAt: at
	});
}
