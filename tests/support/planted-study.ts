import { randomBytes, randomUUID } from 'node:crypto';
import { mkdtemp } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { requirePermission, type Grant } from '$lib/server/access/require-permission';
import type { Permission } from '$lib/server/access/permissions';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import {
	allocationSeal,
	ethicsApproval,
	lab,
	membership,
	person,
	protocolVersion,
	rig,
	room,
	signOff,
	staff,
	study,
	studyRole,
	weeklyHours,
	type StudyRole
} from '$lib/server/db/schema';
import { createPeopleKeys, type PeopleKeys } from '$lib/server/keys/people-keys';
import { protocolContentSchema, type ProtocolContent } from '$scheduler/protocol/protocol-content';

/** A Tuesday morning, before a lab that keeps Lisbon's time opens. */
export const plantedNowMs = Date.UTC(2027, 2, 2, 6, 30);

/** A clock that stands still until it is told another time. */
export function createTestClock(nowMs = plantedNowMs): Clock & { set(ms: number): void } {
	let current = nowMs;
	return { now: () => current, set: (ms) => void (current = ms) };
}

export async function createTestKeys(): Promise<PeopleKeys> {
	const folder = await mkdtemp(join(tmpdir(), 'keys-'));
	return createPeopleKeys({ folder, wrappingKey: randomBytes(32) });
}

const gap = { minHours: 20, targetHours: 24, maxHours: 28, nightsBetween: 1 };

/** Baseline, three practice days, retention a week later; two arms. */
export const plantedContent: ProtocolContent = protocolContentSchema.parse({
	format: 1,
	task: {},
	arms: [
		{ key: 'adaptive', name: 'Adaptive', rule: 'adaptive' },
		{ key: 'fixed', name: 'Fixed', rule: 'fixed' }
	],
	visits: [
		visit(1, 'Baseline', 'baseline', null),
		visit(2, 'Day 1', 'practice', { ...gap, minHours: 44, targetHours: 72, maxHours: 200 }),
		visit(3, 'Day 2', 'practice', gap),
		visit(4, 'Day 3', 'practice', gap),
		visit(5, 'Retention', 'retention', {
			minHours: 144,
			targetHours: 168,
			maxHours: 192,
			nightsBetween: 6
		})
	],
	booking: {
		earliestMinute: 9 * 60,
		latestMinute: 16 * 60,
		sameTimeToleranceMinutes: 120,
		weekdays: [1, 2, 3, 4, 5],
		pauses: { count: 1, minHours: 68, maxHours: 76 }
	},
	policy: {},
	guardRails: { automaticCoverMax: 0.5, automaticReachSdMax: 3, fallback: 'practice' },
	readyLeadHours: 12,
	invitationDelayHours: 24,
	earliestStartHours: { min: 24, max: 48 },
	comparison: null,
	limits: { minutesPerVisit: 90, trialsPerVisit: 400 },
	consentTextVersion: 'v3',
	variants: []
});

function visit(number: number, label: string, kind: string, gapBefore: object | null) {
	const purpose = kind === 'practice' ? 'adaptive' : kind;
	const blocks = [{ number: 1, purpose, trials: 60 }];
	return {
		number,
		label,
		kind,
		minutes: 45,
		setupMinutes: 15,
		cleanupMinutes: 15,
		gapBefore,
		blocks
	};
}

export type PlantedLab = {
	labId: string;
	rigIds: [string, string];
	staffIds: [string, string];
	ownerId: string;
};

/** A lab with two rigs in two rooms and two staff members, open Monday to Friday from 8 to 18. */
export async function plantLab(db: Database): Promise<PlantedLab> {
	const [labId, ownerId] = [randomUUID(), randomUUID()];
	const rigIds: [string, string] = [randomUUID(), randomUUID()];
	const staffIds: [string, string] = [randomUUID(), randomUUID()];
	const roomIds = [randomUUID(), randomUUID()];
	await db.insert(lab).values({ id: labId, name: 'Tidewater Movement Lab', zone: 'Europe/Lisbon' });
	await db
		.insert(person)
		.values({ id: ownerId, name: 'Olga Owner', email: `${ownerId}@lab.example` });
	await db.insert(membership).values({ labId, personId: ownerId, isSteward: true });
	await db.insert(room).values([
		{ id: roomIds[0], labId, name: 'Room 1' },
		{ id: roomIds[1], labId, name: 'Room 2' }
	]);
	const limits = { isPowered: false, minutesPerVisit: 90, trialsPerVisit: 400, variableMax: {} };
	await db.insert(rig).values([
		{ id: rigIds[0], labId, roomId: roomIds[0] ?? '', name: 'Gull', limits },
		{ id: rigIds[1], labId, roomId: roomIds[1] ?? '', name: 'Heron', limits }
	]);
	await db.insert(staff).values([
		{ id: staffIds[0], labId, name: 'Ada Sample' },
		{ id: staffIds[1], labId, name: 'Bo Placeholder' }
	]);
	const hours = { labId, opensMinute: 8 * 60, closesMinute: 18 * 60 };
	const weekdays = [1, 2, 3, 4, 5];
	await db
		.insert(weeklyHours)
		.values([
			...rigIds.flatMap((rigId) => weekdays.map((weekday) => ({ ...hours, rigId, weekday }))),
			...staffIds.flatMap((staffId) => weekdays.map((weekday) => ({ ...hours, staffId, weekday })))
		]);
	return { labId, rigIds, staffIds, ownerId };
}

export type PlantedStudy = PlantedLab & { studyId: string; versionId: string; hash: string };

/** A study with every gate open: frozen, signed, approved and sealed for one hash. */
export async function plantStudy(
	db: Database,
	home: PlantedLab,
	options: { codePrefix?: string; content?: ProtocolContent } = {}
): Promise<PlantedStudy> {
	const [studyId, versionId] = [randomUUID(), randomUUID()];
	const { labId, ownerId } = home;
	const hash = randomBytes(32).toString('hex');
	const at = new Date(plantedNowMs);
	await db.insert(study).values({
		id: studyId,
		labId,
		workingTitle: 'Puck release under a moving target',
		publicTitle: 'Practising a sliding movement',
		codePrefix: options.codePrefix ?? 'TW',
		createdBy: ownerId
	});
	await db.insert(protocolVersion).values({
		id: versionId,
		studyId,
		number: 1,
		content: options.content ?? plantedContent,
		hash,
		frozenAt: at,
		frozenBy: ownerId
	});
	const signed = { studyId, protocolHash: hash, personId: ownerId, assumptions: {}, at };
	await db.insert(signOff).values({ ...signed, verdict: 'signed' });
	await db.insert(ethicsApproval).values({
		studyId,
		protocolHash: hash,
		board: 'Board',
		reference: 'E-1',
		approvedOn: '2027-01-01',
		expiresOn: '2028-01-01',
		recordedBy: ownerId,
		recordedAt: at
	});
	await db.insert(allocationSeal).values({
		studyId,
		protocolHash: hash,
		sealedSeed: new Uint8Array(48),
		commitment: randomBytes(32).toString('hex'),
		method: { arms: ['adaptive', 'fixed'], blockSizes: [2, 4] },
		sealedBy: ownerId,
		sealedAt: at
	});
	return { ...home, studyId, versionId, hash };
}

/** A member of the lab with one role in the study, and the way to their grants. */
export async function plantMember(db: Database, home: PlantedStudy, role: StudyRole) {
	const personId = randomUUID();
	const name = `Some ${role}`;
	await db.insert(person).values({ id: personId, name, email: `${personId}@lab.example` });
	await db.insert(membership).values({ labId: home.labId, personId });
	const needsSecond = role === 'approver' || role === 'unblinded-statistician';
	const second = needsSecond ? await plantPerson(db) : null;
	await db.insert(studyRole).values({
		studyId: home.studyId,
		personId,
		role,
		givenBy: home.ownerId,
		...(second ? { confirmedBy: second, confirmedAt: new Date(plantedNowMs) } : {})
	});
	return {
		personId,
		name,
		grantFor<P extends Permission>(permission: P): Promise<Grant<P>> {
			const locals = { db, person: { id: personId, name, email: '' }, path: '/' } as App.Locals;
			return requirePermission(locals, permission, { studyId: home.studyId });
		}
	};
}

async function plantPerson(db: Database): Promise<string> {
	const id = randomUUID();
	await db.insert(person).values({ id, name: 'Second Person', email: `${id}@lab.example` });
	return id;
}
