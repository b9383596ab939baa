import { and, asc, eq, inArray, isNull, lte, notExists, sql } from 'drizzle-orm';
import type { JWK } from 'jose';
import { taskRecordSchema } from '$scheduler/tasks/task-record';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { findHeldForConsent } from '$lib/server/amendments/held-for-consent';
import type { Clock } from '$lib/server/clock';
import type { Database, Transaction } from '$lib/server/db/client';
import {
	block,
	booking,
	bundle,
	decision,
	participant,
	protocolVersion,
	rig
} from '$lib/server/db/schema';
import { findEffectiveBlock } from '$lib/server/decisions/effective-block';
import { loadDecisionWithSettlement } from '$lib/server/decisions/load-decision';
import type { SigningKey } from '$lib/server/keys/signing-key';
import { isPaused } from '$lib/server/pauses/is-paused';
import { findMissingGates } from '$lib/server/studies/load-gates';
import { recordEvent } from '$lib/server/record/record-event';
import { findLimitFaults, joinVariableMax } from './check-limits';
import { nameBundle, sealBundle } from './seal-bundle';

type Due = { decisionId: string; studyId: string };
export type Services = { clock: Clock; signingKey: () => Promise<SigningKey> };

/**
 * Makes the file of every block whose ready hour has come, the same way in every arm: signed by the
 * server, encrypted to the booked rig, one size. Nothing is issued while the study or the person is
 * paused, a gate is shut, an amendment stops the person, or the block exceeds a limit.
 */
export async function issueDueBundles(db: Database, services: Services): Promise<number> {
	const due = await findDue(db, services.clock);
	let count = 0;
	for (const found of due) {
		if (await db.transaction((tx) => issueBundle(tx, services, found))) count += 1;
	}
	return count;
}

async function findDue(db: Database, clock: Clock): Promise<Due[]> {
	const live = db
		.select({ one: sql`1` })
		.from(bundle)
		.where(and(eq(bundle.decisionId, decision.id), isNull(bundle.revokedAt)));
	const scored = db
		.select({ one: sql`1` })
		.from(block)
		.where(
			and(
				eq(block.participantId, decision.participantId),
				eq(block.visitNumber, decision.visitNumber),
				eq(block.blockNumber, decision.blockNumber)
			)
		);
	return (
		db
			.select({ decisionId: decision.id, studyId: decision.studyId })
			.from(decision)
			.innerJoin(
				booking,
				and(
					eq(booking.participantId, decision.participantId),
					eq(booking.visitNumber, decision.visitNumber),
					inArray(booking.state, ['booked', 'attended'])
				)
			)
			.innerJoin(participant, eq(participant.id, decision.participantId))
			.innerJoin(rig, eq(rig.id, booking.rigId))
			.where(
				and(
					lte(decision.readyAt, new Date(clock.now())),
					inArray(decision.state, ['automatic', 'settled', 'fallback']),
					sql`${rig.publicKey} is not null`,
					sql`upper(${booking.occupied}) > ${new Date(clock.now()).toISOString()}`,
					notExists(live),
					notExists(scored)
				)
			)
			// The order shows in the record: it may depend on nothing that an arm changes.
			.orderBy(asc(decision.readyAt), asc(participant.number), asc(decision.blockNumber))
	);
}

async function issueBundle(tx: Transaction, services: Services, { decisionId, studyId }: Due) {
	const { clock } = services;
	const decided = await loadDecisionWithSettlement(tx, { decisionId, studyId });
	const place = decided && (await loadPlace(tx, decided));
	const plan = decided && findEffectiveBlock(decided);
	if (!decided || !place || !plan) return false;
	if (await isPaused(tx, studyId, decided.participantId)) return false;
	if ((await findMissingGates(tx, clock, studyId)).length > 0) return false;
	const who = { studyId, participantId: decided.participantId };
	if ((await findHeldForConsent(tx, clock, who)).length > 0) return false;
	const limits = {
		protocol: place.content,
		rig: place.rig.limits,
		visitNumber: decided.visitNumber
	};
	if (findLimitFaults(plan, limits).length > 0) return false;
	const expiresAt = place.occupied.endsAt;
	const sealed = await sealBundle(
		{
			format: 1,
			participant: place.code,
			visit: decided.visitNumber,
			block: decided.blockNumber,
			rig: place.rig.name,
			issuedAt: new Date(clock.now()).toISOString(),
			expiresAt: expiresAt.toISOString(),
			protocolHash: decided.protocolHash,
			ruleHash: decided.policyHash,
			limits: {
				minutesPerVisit: Math.min(
					place.content.limits.minutesPerVisit,
					place.rig.limits.minutesPerVisit
				),
				trialsPerVisit: Math.min(
					place.content.limits.trialsPerVisit,
					place.rig.limits.trialsPerVisit
				),
				variableMax: joinVariableMax(place.content, place.rig.limits)
			},
			...describeCoordinates(place.content),
			plan,
			fallback: { kind: 'practice', trials: Number(plan.parameters.trials) }
		},
		{ signing: await services.signingKey(), rigPublicKey: place.rig.publicKey as JWK }
	);
	await tx.insert(bundle).values({
		studyId,
		participantId: decided.participantId,
		decisionId,
		rigId: place.rig.id,
		fileName: nameBundle(place.code, decided.visitNumber, decided.blockNumber),
		content: new TextEncoder().encode(sealed),
		issuedAt: new Date(clock.now()),
		expiresAt
	});
	await recordEvent(
		tx,
		clock,
		{ kind: 'system' },
		{
			kind: 'block-issued',
			item: 'decision',
			studyId,
			participantId: decided.participantId,
			body: { decisionId, rigId: place.rig.id }
		}
	);
	return true;
}

/** What the rig needs to read a region's coordinates and a target's level. */
function describeCoordinates({ task }: ProtocolContent) {
	const { resultUnit, variables } = taskRecordSchema.parse(task);
	return {
		resultUnit,
		variables: variables.map(({ name, unit, origin, scale }) => ({ name, unit, origin, scale }))
	};
}

async function loadPlace(tx: Transaction, decided: { participantId: string; visitNumber: number }) {
	const [row] = await tx
		.select({
			code: participant.code,
			content: protocolVersion.content,
			occupied: booking.occupied,
			rig
		})
		.from(booking)
		.innerJoin(rig, eq(rig.id, booking.rigId))
		.innerJoin(participant, eq(participant.id, booking.participantId))
		.innerJoin(protocolVersion, eq(protocolVersion.id, participant.protocolVersionId))
		.where(
			and(
				eq(booking.participantId, decided.participantId),
				eq(booking.visitNumber, decided.visitNumber),
				inArray(booking.state, ['booked', 'attended'])
			)
		);
	return row && row.rig.publicKey ? row : null;
}
