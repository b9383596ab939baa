import { asc, eq, inArray } from 'drizzle-orm';
import { z } from 'zod';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { eventWords, strategyWords } from '$lib/protocol/analysis/event-words';
import type { Database } from '$lib/server/db/client';
import { block, participant, protocolVersion, recordEvent } from '$lib/server/db/schema';
import { tagIntercurrent } from './tag-intercurrent';

const bodySchema = z.record(z.string(), z.unknown()).catch({});

/**
 * What events of the record count as in the protocol's estimand, with the strategy declared for it, by
 * the event's place in the chain. Only of people whose version declares an estimand.
 */
export async function loadEventTags(
	db: Database,
	participantIds: readonly string[]
): Promise<Map<number, string>> {
	if (participantIds.length === 0) return new Map();
	const ids = [...new Set(participantIds)];
	const people = await db
		.select({ id: participant.id, content: protocolVersion.content })
		.from(participant)
		.innerJoin(protocolVersion, eq(protocolVersion.id, participant.protocolVersionId))
		.where(inArray(participant.id, ids));
	const events = await db
		.select()
		.from(recordEvent)
		.where(inArray(recordEvent.participantId, ids))
		.orderBy(asc(recordEvent.seq));
	const stored = await db
		.select({ participantId: block.participantId, visitNumber: block.visitNumber })
		.from(block)
		.where(inArray(block.participantId, ids));
	const tags = new Map<number, string>();
	for (const { id, content } of people) {
		const own = events.filter(({ participantId }) => participantId === id);
		const withData = new Set(
			stored.filter(({ participantId }) => participantId === id).map((one) => one.visitNumber)
		);
		const visitsWithoutData = new Set(
			content.visits.map(({ number }) => number).filter((number) => !withData.has(number))
		);
		const found = tagIntercurrent(
			own.map(({ kind, body }) => ({ kind, body: bodySchema.parse(JSON.parse(body)) })),
			{ visits: content.visits, missedDay: content.missedDay, visitsWithoutData }
		);
		own.forEach(({ seq }, index) => {
			const words = describeTags(found[index] ?? [], content);
			if (words) tags.set(seq, words);
		});
	}
	return tags;
}

function describeTags(
	found: ReturnType<typeof tagIntercurrent>[number],
	{ analysis }: ProtocolContent
): string {
	const declared = analysis?.estimand.events ?? [];
	return found
		.flatMap((event) => {
			const strategy = declared.find((one) => one.event === event)?.strategy;
			return strategy ? [`${eventWords[event].label}, ${strategyWords[strategy].label}`] : [];
		})
		.join('; ');
}
