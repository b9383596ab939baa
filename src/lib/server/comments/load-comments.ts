import { and, asc, eq, inArray } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import { joinAnchor } from '$lib/protocol/comment';
import { findAnchor } from '$lib/protocol/comment-scope';
import { describeProtocol, type ProtocolPart } from '$lib/protocol/describe-protocol';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { person, protocolComment, protocolVersion } from '$lib/server/db/schema';
import { mayReadRule } from '$lib/server/protocols/may-read-rule';

export type Remark = { id: string; body: string; writtenBy: string; writtenAtMs: number };

export type CommentThread = Remark & {
	anchor: string;
	/** Part and line in words. */
	place: string;
	answers: Remark[];
	/** Null while it is open. */
	resolved: { by: string; atMs: number } | null;
};

type ReaderGrant = Grant<'protocol:read' | 'comment:write'>;

/** Scopes that a reader may have: one for the words they read. */
const scopesOf = (grant: ReaderGrant) =>
	mayReadRule(grant) ? (['rule', 'all'] as const) : (['all'] as const);

/** Comments on a version, each at a place that the reader has, open ones first, oldest first. */
export async function loadComments(
	db: Queryable,
	grant: ReaderGrant,
	{ versionId, parts }: { versionId: string; parts: readonly ProtocolPart[] }
): Promise<CommentThread[]> {
	const resolver = alias(person, 'resolver');
	const rows = await db
		.select({
			comment: protocolComment,
			name: person.name,
			email: person.email,
			resolverName: resolver.name,
			resolverEmail: resolver.email
		})
		.from(protocolComment)
		.innerJoin(person, eq(person.id, protocolComment.writtenBy))
		.leftJoin(resolver, eq(resolver.id, protocolComment.resolvedBy))
		.where(
			and(
				eq(protocolComment.protocolVersionId, versionId),
				eq(protocolComment.studyId, grant.studyId),
				inArray(protocolComment.scope, [...scopesOf(grant)])
			)
		)
		.orderBy(asc(protocolComment.writtenAt), asc(protocolComment.id));
	const remark = ({ comment, name, email }: (typeof rows)[number]): Remark => ({
		id: comment.id,
		body: comment.body,
		writtenBy: name ?? email,
		writtenAtMs: comment.writtenAt.getTime()
	});
	const threads = rows.flatMap((row): CommentThread[] => {
		const { partKey, lineKey, answersId, resolvedAt, id } = row.comment;
		const anchor = joinAnchor(partKey, lineKey);
		const found = answersId === null ? findAnchor(parts, anchor) : null;
		if (!found) return [];
		const answers = rows.filter(({ comment }) => comment.answersId === id).map(remark);
		const by = row.resolverName ?? row.resolverEmail ?? '';
		const resolved = resolvedAt && { by, atMs: resolvedAt.getTime() };
		return [{ ...remark(row), anchor, place: found.place, answers, resolved }];
	});
	return threads.toSorted((a, b) => Number(a.resolved !== null) - Number(b.resolved !== null));
}

/** One comment of the study at a place that the reader has; null like one that does not exist. */
export async function findReadableComment(db: Queryable, grant: ReaderGrant, commentId: string) {
	const [row] = await db
		.select({ comment: protocolComment, content: protocolVersion.content })
		.from(protocolComment)
		.innerJoin(protocolVersion, eq(protocolVersion.id, protocolComment.protocolVersionId))
		.where(
			and(
				eq(protocolComment.id, commentId),
				eq(protocolComment.studyId, grant.studyId),
				inArray(protocolComment.scope, [...scopesOf(grant)])
			)
		);
	if (!row) return null;
	const { partKey, lineKey } = row.comment;
	const parts = describeProtocol(row.content, { withRule: mayReadRule(grant) });
	return findAnchor(parts, joinAnchor(partKey, lineKey)) ? row.comment : null;
}
