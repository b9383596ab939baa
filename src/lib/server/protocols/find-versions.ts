import { and, desc, eq, isNotNull, isNull } from 'drizzle-orm';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { Queryable } from '$lib/server/db/client';
import { person, protocolVersion } from '$lib/server/db/schema';

export type FrozenVersion = {
	id: string;
	number: number;
	hash: string;
	content: ProtocolContent;
	frozenAtMs: number;
	frozenBy: string;
	/** Why, in the words of who froze it; empty for versions from before this was asked. */
	reason: string;
};

export type VersionHead = Pick<
	FrozenVersion,
	'number' | 'hash' | 'frozenAtMs' | 'frozenBy' | 'reason'
>;

/** What a list of versions says of one. */
export function headOf({ number, hash, frozenAtMs, frozenBy, reason }: FrozenVersion): VersionHead {
	return { number, hash, frozenAtMs, frozenBy, reason };
}

/** Frozen versions of a study, newest first. */
export async function findFrozenVersions(db: Queryable, studyId: string): Promise<FrozenVersion[]> {
	const rows = await db
		.select({ version: protocolVersion, name: person.name, email: person.email })
		.from(protocolVersion)
		.leftJoin(person, eq(person.id, protocolVersion.frozenBy))
		.where(and(eq(protocolVersion.studyId, studyId), isNotNull(protocolVersion.hash)))
		.orderBy(desc(protocolVersion.number));
	return rows.flatMap(
		({ version: { id, number, hash, content, frozenAt, reason }, name, email }) =>
			hash && frozenAt
				? [
						{
							id,
							number,
							hash,
							content,
							frozenAtMs: frozenAt.getTime(),
							frozenBy: name ?? email ?? '',
							reason
						}
					]
				: []
	);
}

/** The version that is still being written; null when there is none. */
export async function findDraftRow(db: Queryable, studyId: string) {
	const [row] = await db
		.select()
		.from(protocolVersion)
		.where(and(eq(protocolVersion.studyId, studyId), isNull(protocolVersion.hash)))
		.orderBy(desc(protocolVersion.number))
		.limit(1);
	return row ?? null;
}
