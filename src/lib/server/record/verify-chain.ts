import { asc, gt } from 'drizzle-orm';
import type { Queryable } from '$lib/server/db/client';
import { recordEvent } from '$lib/server/db/schema';
import { sha256Hex } from './canonical-json';

type Row = typeof recordEvent.$inferSelect;

export type ChainVerdict =
	| { ok: true; eventCount: number; lastHash: string }
	| { ok: false; seq: number; reason: 'missing-before' | 'previous-differs' | 'content-differs' };

const pageSize = 1_000;

/** Recomputes every hash of the record from its content and names the first broken link. */
export async function verifyChain(db: Queryable): Promise<ChainVerdict> {
	let last = { seq: 0, hash: '' };
	for (;;) {
		const rows = await db
			.select()
			.from(recordEvent)
			.where(gt(recordEvent.seq, last.seq))
			.orderBy(asc(recordEvent.seq))
			.limit(pageSize);
		for (const row of rows) {
			const reason = findFault(row, last);
			if (reason) return { ok: false, seq: row.seq, reason };
			last = { seq: row.seq, hash: row.hash };
		}
		if (rows.length < pageSize) return { ok: true, eventCount: last.seq, lastHash: last.hash };
	}
}

function findFault(row: Row, last: { seq: number; hash: string }) {
	if (row.seq !== last.seq + 1) return 'missing-before' as const;
	if (row.previousHash !== last.hash) return 'previous-differs' as const;
	return computeHash(row) === row.hash ? null : ('content-differs' as const);
}

/** The hash of one event, over the same text as the database's trigger. */
export function computeHash(row: Omit<Row, 'hash'>): string {
	const fields = [
		row.previousHash,
		String(row.seq),
		row.at.toISOString(),
		row.labId ?? '',
		row.studyId ?? '',
		row.participantId ?? '',
		row.actorId ?? '',
		row.actorKind,
		row.kind,
		row.item,
		row.body
	];
	return sha256Hex(fields.join('\n'));
}
