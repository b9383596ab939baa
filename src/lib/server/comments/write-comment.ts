import { and, eq, isNotNull } from 'drizzle-orm';
import { splitAnchor } from '$lib/protocol/comment';
import { findCommentScope } from '$lib/protocol/comment-scope';
import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database, Transaction } from '$lib/server/db/client';
import { protocolComment, protocolVersion } from '$lib/server/db/schema';
import { mayReadRule } from '$lib/server/protocols/may-read-rule';
import { actorOf, recordEvent } from '$lib/server/record/record-event';
import { findReadableComment } from './load-comments';

export type WriteOutcome = { ok: true; id: string } | { ok: false; reason: 'no-such-place' };

/** Leaves a comment on a part or line of a frozen version that the writer reads. */
export async function writeComment(
	db: Database,
	clock: Clock,
	grant: Grant<'comment:write'>,
	{ version, anchor, body }: { version: number; anchor: string; body: string }
): Promise<WriteOutcome> {
	return db.transaction(async (tx): Promise<WriteOutcome> => {
		const [row] = await tx
			.select({ id: protocolVersion.id, content: protocolVersion.content })
			.from(protocolVersion)
			.where(
				and(
					eq(protocolVersion.studyId, grant.studyId),
					eq(protocolVersion.number, version),
					isNotNull(protocolVersion.hash)
				)
			);
		const scope = row && findCommentScope(row.content, anchor, { withRule: mayReadRule(grant) });
		if (!row || !scope) return { ok: false, reason: 'no-such-place' };
		const place = { protocolVersionId: row.id, ...splitAnchor(anchor), scope, answersId: null };
		return store(tx, clock, grant, { ...place, body });
	});
}

/** Answers a comment; the answer is for whom the comment is. */
export async function answerComment(
	db: Database,
	clock: Clock,
	grant: Grant<'comment:write'>,
	{ commentId, body }: { commentId: string; body: string }
): Promise<WriteOutcome> {
	return db.transaction(async (tx): Promise<WriteOutcome> => {
		const root = await findReadableComment(tx, grant, commentId);
		if (!root || root.answersId !== null) return { ok: false, reason: 'no-such-place' };
		const { protocolVersionId, partKey, lineKey, scope, id } = root;
		return store(tx, clock, grant, {
			protocolVersionId,
			partKey,
			lineKey,
			scope,
			answersId: id,
			body
		});
	});
}

/** Marks a comment as resolved, or opens it again, with who and when. */
export async function resolveComment(
	db: Database,
	clock: Clock,
	grant: Grant<'comment:write'>,
	{ commentId, resolved }: { commentId: string; resolved: boolean }
): Promise<{ ok: true } | { ok: false; reason: 'no-such-comment' }> {
	return db.transaction(async (tx) => {
		const root = await findReadableComment(tx, grant, commentId);
		if (!root || root.answersId !== null) {
			return { ok: false as const, reason: 'no-such-comment' as const };
		}
		await tx
			.update(protocolComment)
			.set({
				resolvedBy: resolved ? grant.personId : null,
				resolvedAt: resolved ? new Date(clock.now()) : null
			})
			.where(eq(protocolComment.id, root.id));
		await recordEvent(tx, clock, actorOf(grant), {
			kind: resolved ? 'comment-resolved' : 'comment-reopened',
			item: root.scope === 'all' ? 'protocol-text' : 'block-parameters',
			studyId: grant.studyId,
			body: { commentId }
		});
		return { ok: true as const };
	});
}

type NewComment = Pick<
	typeof protocolComment.$inferInsert,
	'protocolVersionId' | 'partKey' | 'lineKey' | 'scope' | 'answersId' | 'body'
>;

async function store(
	tx: Transaction,
	clock: Clock,
	grant: Grant<'comment:write'>,
	comment: NewComment
): Promise<WriteOutcome> {
	const { studyId, personId } = grant;
	const [row] = await tx
		.insert(protocolComment)
		.values({ ...comment, studyId, writtenBy: personId, writtenAt: new Date(clock.now()) })
		.returning({ id: protocolComment.id });
	if (!row) throw new Error('comment was not stored');
	await recordEvent(tx, clock, actorOf(grant), {
		kind: 'comment-written',
		item: comment.scope === 'all' ? 'protocol-text' : 'block-parameters',
		studyId,
		body: { commentId: row.id }
	});
	return { ok: true, id: row.id };
}
