import { eq } from 'drizzle-orm';
import type { AmendmentTerms } from '$lib/protocol/amendment';
import type { Database } from '$lib/server/db/client';
import * as t from '$lib/server/db/schema';
import { canonicalJson, sha256Hex } from '$lib/server/record/canonical-json';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { RunningStudy } from './running-study';

/** A second version of a running study, signed off, approved and sealed, with what it declares. */
export async function plantAmendment(
	db: Database,
	study: RunningStudy,
	input: { content: ProtocolContent; terms: AmendmentTerms; atMs: number }
) {
	const { content, terms, atMs } = input;
	const at = new Date(atMs);
	const hash = sha256Hex(canonicalJson(content));
	const [studyId, personId] = [study.study.id, study.person.id];
	const [version] = await db
		.insert(t.protocolVersion)
		.values({ studyId, number: 2, content, hash, frozenAt: at, frozenBy: personId })
		.returning();
	if (!version) throw new Error('not planted');
	await db.insert(t.amendment).values({
		protocolVersionId: version.id,
		studyId,
		amendsId: study.version.id,
		...terms,
		declaredBy: personId,
		declaredAt: at
	});
	await db.insert(t.signOff).values({
		studyId,
		protocolHash: hash,
		verdict: 'signed',
		assumptions: {},
		personId,
		at
	});
	const [approval] = await db
		.select()
		.from(t.ethicsApproval)
		.where(eq(t.ethicsApproval.studyId, studyId));
	if (!approval) throw new Error('the study has no approval');
	const { id: _, ...letter } = approval;
	await db.insert(t.ethicsApproval).values({ ...letter, protocolHash: hash });
	await db.insert(t.allocationSeal).values({
		studyId,
		protocolHash: hash,
		sealedSeed: new Uint8Array(4),
		commitment: 'd'.repeat(64),
		method: { arms: content.arms.map((arm) => arm.key), blockSizes: [2] },
		sealedBy: personId,
		sealedAt: at
	});
	return { id: version.id, hash };
}
