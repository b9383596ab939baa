import type { AmendmentTerms } from '$lib/protocol/amendment';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Transaction } from '$lib/server/db/client';
import { amendment } from '$lib/server/db/schema';
import { loadRunningVersion } from '$lib/server/studies/load-gates';
import { loadStudyZone } from '$lib/server/studies/load-study-zone';
import { localDateOf } from '$lib/time/wall-clock';

export type AmendmentRefusal = {
	ok: false;
	reason: 'in-the-past' | 'same-consent-text' | 'nothing-runs';
};

/** Keeps what an amendment declares about the people in flight; null when it is kept. */
export async function declareAmendment(
	tx: Transaction,
	clock: Clock,
	grant: Grant<'protocol:freeze'>,
	input: { versionId: string; content: ProtocolContent; terms: AmendmentTerms }
): Promise<AmendmentRefusal | null> {
	const { studyId, personId } = grant;
	const { versionId, content, terms } = input;
	const running = await loadRunningVersion(tx, clock, studyId);
	if (!running) return { ok: false, reason: 'nothing-runs' };
	const today = localDateOf(clock.now(), await loadStudyZone(tx, studyId));
	if (terms.effectiveOn < today) return { ok: false, reason: 'in-the-past' };
	const isNewText = running.content.consentTextVersion !== content.consentTextVersion;
	if (terms.renewal !== 'nobody' && !isNewText) return { ok: false, reason: 'same-consent-text' };
	await tx.insert(amendment).values({
		protocolVersionId: versionId,
		studyId,
		amendsId: running.id,
		...terms,
		declaredBy: personId,
		declaredAt: new Date(clock.now())
	});
	return null;
}
