import { desc, eq, and } from 'drizzle-orm';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { person, signOff } from '$lib/server/db/schema';
import { findFrozenVersions } from '$lib/server/protocols/find-versions';

export type Verdict = {
	verdict: 'signed' | 'sent-back';
	comment: string;
	by: string;
	atMs: number;
};

export type LoadedPower = {
	/** Frozen versions, newest first. */
	versionNumbers: number[];
	version: {
		number: number;
		hash: string;
		comparison: ProtocolContent['comparison'];
		arms: ProtocolContent['arms'];
		visitCount: number;
	};
	/** What was said of this hash, newest first; the first counts. */
	verdicts: Verdict[];
};

/** What the power of a frozen version follows from, and what was said of it. Null: nothing frozen. */
export async function loadPower(
	db: Queryable,
	grant: Grant<'power:read'>,
	{ number }: { number?: number | undefined } = {}
): Promise<LoadedPower | null> {
	const frozen = await findFrozenVersions(db, grant.studyId);
	const found = number === undefined ? frozen[0] : frozen.find((row) => row.number === number);
	if (!found) return null;
	const { hash, content } = found;
	return {
		versionNumbers: frozen.map((version) => version.number),
		version: {
			number: found.number,
			hash,
			comparison: content.comparison,
			arms: content.arms,
			visitCount: content.visits.length
		},
		verdicts: await findVerdicts(db, grant.studyId, hash)
	};
}

async function findVerdicts(db: Queryable, studyId: string, hash: string): Promise<Verdict[]> {
	const rows = await db
		.select({ said: signOff, name: person.name, email: person.email })
		.from(signOff)
		.innerJoin(person, eq(person.id, signOff.personId))
		.where(and(eq(signOff.studyId, studyId), eq(signOff.protocolHash, hash)))
		.orderBy(desc(signOff.at));
	return rows.map(({ said, name, email }) => ({
		verdict: said.verdict,
		comment: said.comment,
		by: name ?? email,
		atMs: said.at.getTime()
	}));
}
