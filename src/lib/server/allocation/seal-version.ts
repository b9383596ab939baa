import { sql } from 'drizzle-orm';
import type { SealInput } from '$lib/allocation/seal-input';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Settings } from '$lib/server/config';
import type { Database } from '$lib/server/db/client';
import { allocationSeal } from '$lib/server/db/schema';
import { sealNewAllocation } from '$lib/server/keys/allocation-seal';
import { findFrozenVersions } from '$lib/server/protocols/find-versions';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { findSeal } from './find-seal';

type Services = { clock: Clock; settings: Pick<Settings, 'OVALRY_ALLOCATION_KEY'> };

export type SealOutcome =
	| { ok: true; commitment: string }
	| { ok: false; reason: 'unknown-version' | 'already-sealed' | 'sizes-do-not-fit' };

/**
 * Seals the allocation of a frozen version: draws 256 random bits, keeps them encrypted, and shows a
 * commitment. Done once per version; the sequence can then be neither read nor drawn again.
 */
export async function sealVersion(
	db: Database,
	{ clock, settings }: Services,
	grant: Grant<'allocation:seal'>,
	{ protocolHash, blockSizes }: SealInput
): Promise<SealOutcome> {
	const { studyId, personId } = grant;
	return db.transaction(async (tx): Promise<SealOutcome> => {
		await tx.execute(sql`select pg_advisory_xact_lock(hashtext(${`allocation:${studyId}`}))`);
		const versions = await findFrozenVersions(tx, studyId);
		const version = versions.find(({ hash }) => hash === protocolHash);
		if (!version) return { ok: false, reason: 'unknown-version' };
		if (await findSeal(tx, studyId, protocolHash)) return { ok: false, reason: 'already-sealed' };
		const arms = version.content.arms.map(({ key }) => key);
		const sizes = [...new Set(blockSizes)].sort((a, b) => a - b);
		if (!sizes.every((size) => size % arms.length === 0)) {
			return { ok: false, reason: 'sizes-do-not-fit' };
		}
		const { sealed, commitment } = sealNewAllocation(settings.OVALRY_ALLOCATION_KEY, studyId);
		await tx.insert(allocationSeal).values({
			studyId,
			protocolHash,
			sealedSeed: sealed,
			commitment,
			method: { arms, blockSizes: sizes },
			sealedBy: personId,
			sealedAt: new Date(clock.now())
		});
		const { number } = version;
		await recordEvent(tx, clock, actorOf(grant), {
			kind: 'allocation-sealed',
			item: 'protocol-text',
			studyId,
			body: { number, protocolHash }
		});
		await recordEvent(tx, clock, actorOf(grant), {
			kind: 'allocation-method-sealed',
			item: 'allocation-method',
			studyId,
			body: { number, protocolHash, commitment, arms, blockSizes: sizes }
		});
		return { ok: true, commitment };
	});
}
