import { eq } from 'drizzle-orm';
import type { WaitingItem } from '$lib/waiting/waiting-item';
import { loadLabCalendar } from '$lib/server/bookings/load-lab-calendar';
import { toChain, toProblem } from '$lib/server/bookings/load-person-plan';
import { describeContext } from '$lib/server/bookings/tell-broken-rules';
import type { Grant } from '$lib/server/access/require-permission';
import type { Queryable } from '$lib/server/db/client';
import { lab } from '$lib/server/db/schema';
import type { PersonRecord } from '$lib/server/people/load-person-records';
import { checkChain } from '$scheduler/booking/check-chain.ts';
import { describeBrokenRule } from '$scheduler/booking/describe-broken-rule.ts';
import { personHref, visitHref, type ItemContext } from './person-items';

/**
 * Chains with visits to come that no longer keep every rule: after a missed visit, a holiday or
 * changed hours, or since the person was given an earliest start.
 */
export async function listChainItems(
	db: Queryable,
	grant: Grant<'today:read' | 'participant:list'>,
	records: readonly PersonRecord[],
	context: ItemContext
): Promise<WaitingItem[]> {
	// Other people's bookings cannot clash with a chain that is booked: none is loaded.
	const named = await loadLabCalendar(db, { labId: grant.labId });
	return records.flatMap((record) => {
		const item = findBrokenChain(record, named, context);
		return item ? [item] : [];
	});
}

function findBrokenChain(
	record: PersonRecord,
	named: Awaited<ReturnType<typeof loadLabCalendar>>,
	context: ItemContext
): WaitingItem | null {
	const { person, content, visits } = record;
	if (person.withdrawnAtMs !== null) return null;
	const chain = toChain(visits, context.nowMs);
	if (chain.every(({ fixed }) => fixed)) return null;
	const participant = person;
	const problem = toProblem({ participant, content, lab: named, nowMs: context.nowMs });
	const [broken] = checkChain(problem, chain);
	if (!broken) return null;
	const visit = visits.find(
		({ visitNumber, state }) => visitNumber === broken.visitNumber && state === 'booked'
	);
	const { sentence } = describeBrokenRule(broken, describeContext({ problem, lab: named }));
	return {
		key: `chain-broken ${person.id}`,
		kind: 'chain-broken',
		participantId: person.id,
		tone: 'amber',
		title: `${person.code}’s chain breaks a rule`,
		what: sentence,
		ifNothing: 'The visit would not count as the protocol means it.',
		byMs: visit?.startMs ?? null,
		byText: null,
		act: {
			label: 'See what can be mended',
			href: visit ? visitHref(context, visit) : personHref(context, person.id)
		}
	};
}

/** The zone in which a lab tells its times. */
export async function loadLabZone(db: Queryable, labId: string): Promise<string> {
	const [row] = await db.select({ zone: lab.zone }).from(lab).where(eq(lab.id, labId));
	return row?.zone ?? 'UTC';
}
