import { and, eq, sql } from 'drizzle-orm';
import { fitToRigs } from '$lib/protocol/limits/fit-to-rigs';
import { createPatternDraft } from '$lib/protocol/patterns';
import type { NewStudy } from '$lib/protocol/new-study';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Queryable } from '$lib/server/db/client';
import { protocolVersion, study, studyRole } from '$lib/server/db/schema';
import { storeDraft } from '$lib/server/protocols/draft-content';
import { loadRigLimits } from '$lib/server/protocols/load-draft';
import { actorOf, recordEvent } from '$lib/server/record/record-event';

export type CreateStudyOutcome =
	{ ok: true; studyId: string } | { ok: false; reason: 'prefix-taken' };

/** Creates a study with its first draft; whoever creates it becomes its investigator. */
export async function createStudy(
	db: Database,
	clock: Clock,
	grant: Grant<'study:create'>,
	input: NewStudy
): Promise<CreateStudyOutcome> {
	const { labId, personId } = grant;
	const { workingTitle, publicTitle, phone, pattern } = input;
	const codePrefix = input.codePrefix.toUpperCase();
	const createdAt = new Date(clock.now());
	return db.transaction(async (tx): Promise<CreateStudyOutcome> => {
		if (await isPrefixTaken(tx, labId, codePrefix)) return { ok: false, reason: 'prefix-taken' };
		const [made] = await tx
			.insert(study)
			.values({
				labId,
				workingTitle,
				publicTitle,
				codePrefix,
				phone,
				createdBy: personId,
				createdAt
			})
			.returning({ id: study.id });
		if (!made) throw new Error('a study was not stored');
		const studyId = made.id;
		const role = 'investigator' as const;
		await tx
			.insert(studyRole)
			.values({ studyId, personId, role, givenBy: personId, givenAt: createdAt });
		const draft = fitToRigs(createPatternDraft(pattern), await loadRigLimits(tx, labId));
		const content = storeDraft(draft);
		await tx.insert(protocolVersion).values({ studyId, number: 1, content, createdAt });
		await recordEvent(tx, clock, actorOf(grant), {
			kind: 'study-created',
			item: 'protocol-text',
			labId,
			studyId,
			body: { pattern, codePrefix }
		});
		return { ok: true, studyId };
	});
}

/** Codes of two studies of one lab must not be mistaken for each other. */
async function isPrefixTaken(tx: Queryable, labId: string, codePrefix: string): Promise<boolean> {
	await tx.execute(sql`select pg_advisory_xact_lock(hashtext(${`study-prefix:${labId}`}))`);
	const [found] = await tx
		.select({ id: study.id })
		.from(study)
		.where(and(eq(study.labId, labId), eq(study.codePrefix, codePrefix)));
	return found !== undefined;
}
