import type { Grant } from '$lib/server/access/require-permission';
import type { Clock } from '$lib/server/clock';
import type { Database } from '$lib/server/db/client';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import { proposeChains } from './propose-chains';
import { savePlan } from './save-plan';
import { explainRefusal } from './explain-refusal';

/** What became of one person's booking, in words for the page. */
export type EarliestResult = {
	code: string;
	ok: boolean;
	text: string;
};

/**
 * Books the earliest chain of each of several people, one after the other in the order given. Who
 * cannot be booked is named with the reason; the others are booked all the same.
 */
export async function bookEarliest(
	db: Database,
	clock: Clock,
	grant: Grant<'booking:change'>,
	{ participantIds, mail }: { participantIds: readonly string[]; mail: MailSetting }
): Promise<EarliestResult[]> {
	const results: EarliestResult[] = [];
	for (const participantId of participantIds) {
		const result = await bookOne(db, clock, grant, { participantId, mail });
		if (result) results.push(result);
	}
	return results;
}

async function bookOne(
	db: Database,
	clock: Clock,
	grant: Grant<'booking:change'>,
	{ participantId, mail }: { participantId: string; mail: MailSetting }
): Promise<EarliestResult | null> {
	for (let attempt = 1; ; attempt += 1) {
		const found = await proposeChains(db, clock, grant, { participantId, chainCount: 1 });
		if (!found.ok && found.reason !== 'no-chain') return null;
		const { code } = found.plan.participant;
		if (!found.ok) return { code, ok: false, text: 'no chain keeps every rule in twelve weeks' };
		const places = found.chains[0]?.visits.filter(({ fixed }) => !fixed) ?? [];
		const { planVersion } = found.plan;
		const saved = await savePlan(db, clock, grant, { participantId, places, planVersion, mail });
		if (saved.ok) {
			const visits = saved.bookedCount === 1 ? '1 visit' : `${saved.bookedCount} visits`;
			return { code, ok: true, text: `${visits} booked` };
		}
		// Somebody else changed the plan meanwhile: look again at what is free.
		const isWorthAnotherLook = saved.reason === 'stale' || saved.reason === 'taken';
		if (isWorthAnotherLook && attempt < 5) continue;
		return { code, ok: false, text: explainRefusal(saved).text };
	}
}
