import { and, asc, eq, isNotNull } from 'drizzle-orm';
import type { AmendmentTerms } from '$lib/protocol/amendment';
import { findChainChanges } from '$lib/protocol/find-chain-changes';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { amendment, protocolVersion } from '$lib/server/db/schema';
import { loadRunningVersion } from '$lib/server/studies/load-gates';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { AmendmentInForce } from './follower-state';

export type AmendedVersion = {
	id: string;
	number: number;
	hash: string;
	content: ProtocolContent;
	/** Null for a version that was frozen before any ran, or without saying anything of people. */
	terms: AmendmentTerms | null;
};

/** Frozen versions with what each declares of people in flight, oldest first. */
export async function loadAmendedVersions(
	db: Queryable,
	studyId: string
): Promise<AmendedVersion[]> {
	const rows = await db
		.select({ version: protocolVersion, terms: amendment })
		.from(protocolVersion)
		.leftJoin(amendment, eq(amendment.protocolVersionId, protocolVersion.id))
		.where(and(eq(protocolVersion.studyId, studyId), isNotNull(protocolVersion.hash)))
		.orderBy(asc(protocolVersion.number));
	return rows.flatMap(({ version: { id, number, hash, content }, terms }) =>
		hash ? [{ id, number, hash, content, terms: terms && readTerms(terms) }] : []
	);
}

function readTerms(row: typeof amendment.$inferSelect): AmendmentTerms {
	const { effectiveOn, follows, renewal, withoutRenewal } = row;
	return { effectiveOn, follows, renewal, withoutRenewal };
}

export type AmendmentPlan = {
	target: AmendedVersion;
	runs: boolean;
	versions: AmendedVersion[];
};

/** The plan of one amendment, or of the one that runs; null where nothing is amended. */
export async function loadAmendmentPlan(
	db: Queryable,
	clock: Clock,
	{ studyId, number }: { studyId: string; number?: number | undefined }
): Promise<AmendmentPlan | null> {
	const versions = await loadAmendedVersions(db, studyId);
	if (!versions.some(({ terms }) => terms !== null)) return null;
	const running = await loadRunningVersion(db, clock, studyId);
	const wanted = number ?? running?.number;
	const target = versions.find((version) => version.number === wanted);
	if (!target?.terms) return null;
	return { target, runs: running?.number === target.number, versions };
}

/**
 * What an amendment is for somebody of one version. Whoever skipped amendments in between owes what
 * any of them asks for.
 */
export function findTermsFor(
	{ target, runs, versions }: AmendmentPlan,
	fromId: string
): AmendmentInForce | null {
	const from = versions.find(({ id }) => id === fromId);
	const { terms } = target;
	if (!from || !terms) return null;
	const between = versions.filter(({ number }) => number > from.number && number <= target.number);
	const renewing = between.filter((version) => (version.terms?.renewal ?? 'nobody') !== 'nobody');
	const stops = renewing.some((version) => version.terms?.withoutRenewal === 'stops');
	return {
		follows: terms.follows,
		renewal: renewing.at(-1)?.terms?.renewal ?? 'nobody',
		withoutRenewal: stops ? 'stops' : 'stays',
		runs,
		chainDiffers: findChainChanges(from.content, target.content).length > 0
	};
}
