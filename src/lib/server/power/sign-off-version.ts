import { listPowerRows } from '$lib/power/power-report';
import type { SignOffInput } from '$lib/power/sign-off';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import { signOff } from '$lib/server/db/schema';
import { findFrozenVersions } from '$lib/server/protocols/find-versions';
import { canonicalJson, sha256Hex } from '$lib/server/record/canonical-json';
import { actorOf, recordEvent } from '$lib/server/record/record-event';

export type SignOffOutcome =
	{ ok: true; versionNumber: number } | { ok: false; reason: 'unknown-version' };

/**
 * Records what the statistician says of one hash, with the assumptions and the numbers that were
 * computed from them. The latest word on a hash counts.
 */
export async function signOffVersion(
	db: Database,
	clock: Clock,
	grant: Grant<'power:sign'>,
	{ protocolHash, verdict, comment }: SignOffInput
): Promise<SignOffOutcome> {
	const { studyId, personId } = grant;
	return db.transaction(async (tx): Promise<SignOffOutcome> => {
		const versions = await findFrozenVersions(tx, studyId);
		const version = versions.find(({ hash }) => hash === protocolHash);
		if (!version) return { ok: false, reason: 'unknown-version' };
		const { comparison } = version.content;
		const assumptions = comparison
			? { comparison, method: 'two-sample t, noncentral t', power: listPowerRows(comparison) }
			: { comparison: null };
		const at = new Date(clock.now());
		await tx
			.insert(signOff)
			.values({ studyId, protocolHash, verdict, comment, assumptions, personId, at });
		await recordEvent(tx, clock, actorOf(grant), {
			kind: verdict === 'signed' ? 'version-signed' : 'version-sent-back',
			item: 'protocol-text',
			studyId,
			body: {
				number: version.number,
				protocolHash,
				assumptionsHash: sha256Hex(canonicalJson(assumptions)),
				commentHash: sha256Hex(comment)
			}
		});
		return { ok: true, versionNumber: version.number };
	});
}
