import { randomUUID } from 'node:crypto';
import { exportJWK, generateKeyPair } from 'jose';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { Grant } from '$lib/server/access/require-permission';
import type { Permission } from '$lib/server/access/permissions';
import type { Database } from '$lib/server/db/client';
import * as t from '$lib/server/db/schema';
import { canonicalJson, sha256Hex } from '$lib/server/record/canonical-json';

export const hourMs = 3_600_000;

export type RunningStudy = Awaited<ReturnType<typeof plantRunningStudy>>;

/** A lab with one rig and a study whose gates are all open, written by the owner. */
export async function plantRunningStudy(db: Database, content: ProtocolContent, nowMs: number) {
	const at = new Date(nowMs);
	const [person] = await db
		.insert(t.person)
		.values({ name: 'Ida Invented', email: `${randomUUID()}@lab.example` })
		.returning();
	const [lab] = await db
		.insert(t.lab)
		.values({ name: 'Tidewater Movement Lab', zone: 'Europe/Lisbon' })
		.returning();
	if (!person || !lab) throw new Error('not planted');
	await db.insert(t.membership).values({ labId: lab.id, personId: person.id });
	const [room] = await db.insert(t.room).values({ labId: lab.id, name: 'Room 1' }).returning();
	const pair = await generateKeyPair('ECDH-ES', { crv: 'P-256', extractable: true });
	const limits = { isPowered: false, minutesPerVisit: 120, trialsPerVisit: 2000, variableMax: {} };
	const [rig] = await db
		.insert(t.rig)
		.values({
			labId: lab.id,
			roomId: room?.id ?? '',
			name: 'Gull',
			limits,
			publicKey: { ...(await exportJWK(pair.publicKey)) }
		})
		.returning();
	const [staff] = await db
		.insert(t.staff)
		.values({ labId: lab.id, name: 'Sam Staged' })
		.returning();
	const [study] = await db
		.insert(t.study)
		.values({
			labId: lab.id,
			workingTitle: 'Hidden aim',
			publicTitle: 'Practising a sliding movement',
			codePrefix: 'TW',
			createdBy: person.id
		})
		.returning();
	if (!room || !rig || !staff || !study) throw new Error('not planted');
	const hash = sha256Hex(canonicalJson(content));
	const [version] = await db
		.insert(t.protocolVersion)
		.values({ studyId: study.id, number: 1, content, hash, frozenAt: at, frozenBy: person.id })
		.returning();
	if (!version) throw new Error('not planted');
	await db.insert(t.signOff).values({
		studyId: study.id,
		protocolHash: hash,
		verdict: 'signed',
		assumptions: {},
		personId: person.id,
		at
	});
	await db.insert(t.ethicsApproval).values({
		studyId: study.id,
		protocolHash: hash,
		board: 'Board',
		reference: 'E-1',
		approvedOn: '2020-01-01',
		expiresOn: '2099-01-01',
		recordedBy: person.id,
		recordedAt: at
	});
	const [seal] = await db
		.insert(t.allocationSeal)
		.values({
			studyId: study.id,
			protocolHash: hash,
			sealedSeed: new Uint8Array(4),
			commitment: 'c'.repeat(64),
			method: { arms: content.arms.map((arm) => arm.key), blockSizes: [2] },
			sealedBy: person.id,
			sealedAt: at
		})
		.returning();
	if (!seal) throw new Error('not planted');
	let count = 0;
	return {
		lab,
		room,
		rig,
		staff,
		study,
		version,
		seal,
		person,
		rigPrivateKey: await exportJWK(pair.privateKey),
		grant: <P extends Permission>(permission: P) =>
			makeGrant(permission, { personId: person.id, labId: lab.id, studyId: study.id }),
		async enrol(code: string) {
			count += 1;
			const [row] = await db
				.insert(t.participant)
				.values({
					studyId: study.id,
					protocolVersionId: version.id,
					number: count,
					code,
					state: 'consented',
					zone: 'Europe/Lisbon',
					enrolledAt: at,
					consentedAt: at
				})
				.returning();
			if (!row) throw new Error('not planted');
			return row;
		},
		async book(participantId: string, visitNumber: number, startMs: number, minutes = 30) {
			const range = (before: number, after: number) => ({
				startsAt: new Date(startMs - before),
				endsAt: new Date(startMs + minutes * 60_000 + after)
			});
			const [row] = await db
				.insert(t.booking)
				.values({
					studyId: study.id,
					participantId,
					visitNumber,
					rigId: rig.id,
					roomId: room.id,
					staffId: staff.id,
					during: range(0, 0),
					occupied: range(900_000, 900_000),
					createdAt: at,
					changedAt: at
				})
				.returning();
			if (!row) throw new Error('not planted');
			return row;
		},
		/** Stands in for the sealed sequence: everybody gets the arm of `armOf`. */
		allocateTo(arm: string) {
			return async (
				tx: Parameters<Parameters<Database['transaction']>[0]>[0],
				participantId: string
			) => {
				const sequenceIndex = (await tx.select().from(t.allocation)).length;
				await tx.insert(t.allocation).values({
					participantId,
					studyId: study.id,
					sealId: seal.id,
					sequenceIndex,
					arm,
					allocatedAt: at
				});
				return true;
			};
		}
	};
}

function makeGrant<P extends Permission>(
	permission: P,
	ids: { personId: string; labId: string; studyId: string }
): Grant<P> {
	const grant = {
		permission,
		...ids,
		personName: 'Ida Invented',
		roles: [],
		isSteward: false,
		sees: () => new Set(['yes'])
	};
	return grant as unknown as Grant<P>;
}
