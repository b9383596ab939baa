import { and, desc, eq } from 'drizzle-orm';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Queryable } from '$lib/server/db/client';
import { ethicsApproval, ethicsLetter, person, protocolVersion } from '$lib/server/db/schema';
import { mayReadRule } from '$lib/server/protocols/may-read-rule';
import { loadStudyZone } from '$lib/server/studies/load-study-zone';
import { localDateOf } from '$lib/time/wall-clock';

export type ListedLetter = {
	/** Null for roles that may know that there is a letter, not what it says. */
	id: string | null;
	fileName: string;
	byteCount: number;
	sha256: string;
};

export type ListedApproval = {
	id: string;
	board: string;
	reference: string;
	approvedOn: string;
	expiresOn: string;
	versionNumber: number;
	state: 'valid' | 'expired' | 'revoked';
	/** The day on which it was recorded, and by whom. */
	recordedOn: string;
	recordedBy: string;
	letters: ListedLetter[];
};

/** Every ethics approval of the study, the one that lasts longest first. */
export async function listApprovals(
	db: Queryable,
	clock: Clock,
	grant: Grant<'protocol:read'>
): Promise<ListedApproval[]> {
	const zone = await loadStudyZone(db, grant.studyId);
	const today = localDateOf(clock.now(), zone);
	const letters = await loadLetters(db, grant);
	const rows = await db
		.select({
			approval: ethicsApproval,
			versionNumber: protocolVersion.number,
			name: person.name,
			email: person.email
		})
		.from(ethicsApproval)
		.innerJoin(person, eq(person.id, ethicsApproval.recordedBy))
		.innerJoin(
			protocolVersion,
			and(
				eq(protocolVersion.studyId, ethicsApproval.studyId),
				eq(protocolVersion.hash, ethicsApproval.protocolHash)
			)
		)
		.where(eq(ethicsApproval.studyId, grant.studyId))
		.orderBy(desc(ethicsApproval.expiresOn));
	return rows.map(({ approval, versionNumber, name, email }) => ({
		id: approval.id,
		board: approval.board,
		reference: approval.reference,
		approvedOn: approval.approvedOn,
		expiresOn: approval.expiresOn,
		versionNumber,
		state: approval.revokedAt ? 'revoked' : approval.expiresOn < today ? 'expired' : 'valid',
		recordedOn: localDateOf(approval.recordedAt.getTime(), zone),
		recordedBy: name ?? email,
		letters: letters
			.filter(({ approvalId }) => approvalId === approval.id)
			.map(({ letter }) => letter)
	}));
}

/** The study's letters without their bytes. A name may tell what the letter says. */
async function loadLetters(db: Queryable, grant: Grant<'protocol:read'>) {
	const mayRead = mayReadRule(grant);
	const rows = await db
		.select({
			id: ethicsLetter.id,
			approvalId: ethicsLetter.approvalId,
			fileName: ethicsLetter.fileName,
			byteCount: ethicsLetter.byteCount,
			sha256: ethicsLetter.sha256
		})
		.from(ethicsLetter)
		.where(eq(ethicsLetter.studyId, grant.studyId))
		.orderBy(ethicsLetter.addedAt, ethicsLetter.id);
	return rows.map(({ id, approvalId, fileName, byteCount, sha256 }) => ({
		approvalId,
		letter: {
			id: mayRead ? id : null,
			fileName: mayRead ? fileName : 'letter',
			byteCount,
			sha256
		}
	}));
}
