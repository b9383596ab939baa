import type { Grant } from '$lib/server/access/require-permission';
import { findHeldForConsent } from '$lib/server/amendments/held-for-consent';
import type { Clock } from '$lib/server/clock';
import type { Database, Transaction } from '$lib/server/db/client';
import { isPaused } from '$lib/server/pauses/is-paused';
import { findMissingGates, type MissingGate } from '$lib/server/studies/load-gates';
import type { PlacedVisit } from '$scheduler/booking/types.ts';
import type { MailSetting } from '$lib/server/invitations/mail-setting';
import { applyPlaces, type AppliedPlaces } from './apply-places';
import { explainClash, isWorthRetrying, type Clash } from './explain-clash';
import { loadPersonPlan, type PersonPlan } from './load-person-plan';
import { countPlanChange, lockLab } from './lock-plan';
import { placeVisits, type Placement } from './place-visits';
import { findNewBreaks, tellBrokenRules, type ToldRule } from './tell-broken-rules';

export type SaveInput = {
	participantId: string;
	/** The visits to be booked or moved, at their new places. */
	places: readonly Placement[];
	/** The plan's version on which the places were chosen. */
	planVersion: number;
	mail: MailSetting;
};

export type SaveRefusal =
	| { ok: false; reason: 'not-found' | 'no-consent' | 'withdrawn' | 'stale' | 'over' | 'nothing' }
	| { ok: false; reason: 'gates-missing'; gates: MissingGate[] }
	| { ok: false; reason: 'breaks-rules'; broken: ToldRule[] }
	| { ok: false; reason: 'taken'; clash: Clash };

export type SaveOutcome = ({ ok: true; planVersion: number } & AppliedPlaces) | SaveRefusal;

/** Thrown to undo the transaction with an answer. */
class Refused extends Error {
	constructor(readonly refusal: SaveRefusal) {
		super(refusal.reason);
	}
}

/**
 * Books or moves visits of one participant, all of them or none. Inside one transaction: the study
 * must be open, the plan unchanged since it was seen, and the whole chain keeps every rule by the
 * independent checker; the database itself refuses a double booking when it commits.
 */
export async function savePlan(
	db: Database,
	clock: Clock,
	grant: Grant<'booking:change'>,
	input: SaveInput
): Promise<SaveOutcome> {
	for (let attempt = 1; ; attempt += 1) {
		let seen: PersonPlan | null = null;
		try {
			return await db.transaction(async (tx) => {
				return saveOnce(tx, clock, grant, input, (plan) => (seen = plan));
			});
		} catch (error) {
			if (error instanceof Refused) return error.refusal;
			if (attempt < 3 && isWorthRetrying(error)) continue;
			const clash = seen && tellClash(error, seen);
			if (!clash) throw error;
			return { ok: false, reason: 'taken', clash };
		}
	}
}

function tellClash(error: unknown, plan: PersonPlan): Clash | null {
	return explainClash(error, plan.lab, plan.participant.code);
}

async function saveOnce(
	tx: Transaction,
	clock: Clock,
	grant: Grant<'booking:change'>,
	{ participantId, places, planVersion, mail }: SaveInput,
	onPlan: (plan: PersonPlan) => void
): Promise<SaveOutcome> {
	await requireOpen(tx, clock, grant, participantId);
	await lockLab(tx, grant.labId);
	const newVersion = await countPlanChange(tx, grant.studyId, planVersion);
	const plan = await loadPersonPlan(tx, clock, grant, participantId);
	if (!plan) throw new Refused({ ok: false, reason: 'not-found' });
	onPlan(plan);
	if (newVersion === null) throw new Refused({ ok: false, reason: 'stale' });
	requireBookable(plan, places);
	const changed = placeVisits(plan, places);
	requireRules(plan, changed);
	const applied = await applyPlaces(tx, clock, grant, { plan, changed, places, mail });
	return { ok: true, planVersion: newVersion, ...applied };
}

async function requireOpen(
	tx: Transaction,
	clock: Clock,
	grant: Grant,
	participantId: string
): Promise<void> {
	const gates = await findMissingGates(tx, clock, grant.studyId);
	if (gates.length === 0 && (await isPaused(tx, grant.studyId, participantId))) {
		const text = 'This person’s part in the study is paused; two different people lift the pause.';
		gates.push({ code: 'paused', text, whose: 'investigator' });
	}
	const [held] = await findHeldForConsent(tx, clock, { studyId: grant.studyId, participantId });
	if (held) {
		const text = `${held.code} signs consent text ${held.textVersion} first: the amendment stops people until they do.`;
		gates.push({ code: 'consent-renewal', text, whose: 'coordinator' });
	}
	if (gates.length > 0) throw new Refused({ ok: false, reason: 'gates-missing', gates });
}

function requireBookable(plan: PersonPlan, places: readonly Placement[]): void {
	const { participant, chain } = plan;
	if (places.length === 0) throw new Refused({ ok: false, reason: 'nothing' });
	if (participant.withdrawnAtMs !== null) throw new Refused({ ok: false, reason: 'withdrawn' });
	if (participant.consentedAtMs === null) throw new Refused({ ok: false, reason: 'no-consent' });
	const isOver = (placement: Placement) =>
		chain.some((one) => one.visitNumber === placement.visitNumber && one.fixed);
	if (places.some(isOver)) throw new Refused({ ok: false, reason: 'over' });
}

function requireRules(plan: PersonPlan, changed: readonly PlacedVisit[]): void {
	const broken = findNewBreaks(plan, changed);
	if (broken.length === 0) return;
	throw new Refused({ ok: false, reason: 'breaks-rules', broken: tellBrokenRules(plan, broken) });
}
