import { yokingSettingsSchema, type MasterBlock } from '$scheduler/policies/yoking/yoked-rule';
import type { DecisionInputsInput } from '$scheduler/policies/decision-record';
import { slotKey, type Slot } from './find-next-slot';
import type { MasterChain, MasterPlace } from './load-master-chain';
import type { PersonOnRecord } from './load-person';

const hourMs = 3_600_000;
/** Shown for the master while every member of the master arm has a partner. */
const nobodyYet = 'not paired yet';

type Place = { slot: Slot; nowMs: number; master: MasterChain | null };

/**
 * The rule of a yoked arm for one place: what the master has run until now, and how long this person may
 * wait for more. Inside a visit nobody is waited for.
 */
export function buildYokedRule(
	person: PersonOnRecord,
	{ slot, nowMs, master }: Place
): Extract<DecisionInputsInput['rule'], { kind: 'yoked' }> {
	const block = person.slots.findIndex((found) => slotKey(found) === slotKey(slot));
	const nowHours = nowMs / hourMs;
	const gap = slot.indexInVisit === 0 ? findGap(person, slot.visitNumber) : null;
	return {
		kind: 'yoked',
		settings: yokingSettingsSchema.parse(person.content.yoking ?? {}),
		...{ block, nowHours },
		previousEndHours: gap ? gap.previousEndMs / hourMs : nowHours,
		gapMaxHours: gap?.maxHours ?? 0,
		master: {
			code: master?.code ?? nobodyYet,
			withdrawn: master?.withdrawn ?? false,
			blocks: (master?.places ?? []).map((place) => describePlace(place, nowMs))
		}
	};
}

/** What was scored later than now does not count: replaying the decision gives the same. */
function describePlace(place: MasterPlace, nowMs: number): MasterBlock {
	if (!place || place.scoredAtMs > nowMs)
		return { scoredAtHours: null, kind: 'practice', parameters: {} };
	const { scoredAtMs, kind, parameters } = place;
	return { scoredAtHours: scoredAtMs / hourMs, kind, parameters };
}

/** End of the visit before, as booked, and the longest gap that may follow it. */
function findGap(person: PersonOnRecord, visitNumber: number) {
	const plan = person.content.visits.find(({ number }) => number === visitNumber)?.gapBefore;
	const before = [...person.visits.keys()].filter((number) => number < visitNumber);
	const visit = person.visits.get(Math.max(...before));
	if (!plan || !visit) return null;
	return { previousEndMs: visit.during.endsAt.getTime(), maxHours: plan.maxHours };
}
