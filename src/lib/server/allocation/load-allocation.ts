import { count, eq } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { allocation, allocationSeal, person, type AllocationMethod } from '$lib/server/db/schema';
import { findFrozenVersions } from '$lib/server/protocols/find-versions';

export type SealOfVersion = {
	commitment: string;
	method: AllocationMethod;
	sealedBy: string;
	sealedAtMs: number;
	/** People who have got their entry; later entries are derived only when their turn comes. */
	releasedCount: number;
};

export type VersionAllocation = {
	number: number;
	hash: string;
	arms: { key: string; name: string }[];
	seal: SealOfVersion | null;
};

/** How each frozen version is allocated, newest first. There is no way to read a later entry. */
export async function loadAllocation(
	db: Queryable,
	grant: Grant<'allocation:read'>
): Promise<VersionAllocation[]> {
	const versions = await findFrozenVersions(db, grant.studyId);
	const seals = await loadSeals(db, grant.studyId);
	return versions.map(({ number, hash, content }) => ({
		number,
		hash,
		arms: content.arms.map(({ key, name }) => ({ key, name })),
		seal: seals.get(hash) ?? null
	}));
}

async function loadSeals(db: Queryable, studyId: string): Promise<Map<string, SealOfVersion>> {
	const rows = await db
		.select({
			hash: allocationSeal.protocolHash,
			commitment: allocationSeal.commitment,
			method: allocationSeal.method,
			sealedAt: allocationSeal.sealedAt,
			name: person.name,
			email: person.email,
			releasedCount: count(allocation.participantId)
		})
		.from(allocationSeal)
		.innerJoin(person, eq(person.id, allocationSeal.sealedBy))
		.leftJoin(allocation, eq(allocation.sealId, allocationSeal.id))
		.where(eq(allocationSeal.studyId, studyId))
		.groupBy(allocationSeal.id, person.id);
	return new Map(
		rows.map(({ hash, name, email, sealedAt, ...seal }) => [
			hash,
			{ ...seal, sealedBy: name ?? email, sealedAtMs: sealedAt.getTime() }
		])
	);
}
