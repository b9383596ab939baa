/** A stop of the one timeline that every participant of a study goes along. */
export type TimelineStep =
	| 'enrolled'
	| 'consented'
	| 'baseline booked'
	| 'baseline done'
	| 'allocated'
	| 'practice'
	| 'retention'
	| 'completed';

/** Where somebody stands: the steps of their study, the one they are at, and words for a table. */
export type TimelinePlace = {
	steps: TimelineStep[];
	at: number;
	hasLeft: boolean;
	words: string;
};

type PlanVisit = { number: number; kind: 'baseline' | 'practice' | 'retention' };
type PlacedVisit = {
	visitNumber: number;
	state: 'booked' | 'attended' | 'no-show' | 'cancelled';
};
type Person = {
	consentedAtMs: number | null;
	baselinePassedAtMs: number | null;
	allocatedAtMs: number | null;
	completedAtMs: number | null;
	withdrawnAtMs: number | null;
	consent: { textVersion: string } | null;
};

export type TimelineQuestion = {
	person: Person;
	plan: readonly PlanVisit[];
	armCount: number;
	visits: readonly PlacedVisit[];
};

/** The steps a study has: those of visits and arms it does not have are left out. */
export function listSteps(plan: readonly PlanVisit[], armCount: number): TimelineStep[] {
	const has = (kind: PlanVisit['kind']) => plan.some((visit) => visit.kind === kind);
	return [
		'enrolled',
		'consented',
		...(has('baseline') ? (['baseline booked', 'baseline done'] as const) : []),
		...(armCount > 1 ? (['allocated'] as const) : []),
		...(has('practice') ? (['practice'] as const) : []),
		...(has('retention') ? (['retention'] as const) : []),
		'completed'
	];
}

/** Where a participant stands on the one timeline. It knows nothing of arms but how many there are. */
export function placeOnTimeline(question: TimelineQuestion): TimelinePlace {
	const steps = listSteps(question.plan, question.armCount);
	const { step, words } = findStep(question);
	const hasLeft = question.person.withdrawnAtMs !== null;
	const at = Math.max(0, steps.indexOf(step));
	return { steps, at, hasLeft, words: hasLeft ? 'withdrawn' : words };
}

function findStep(question: TimelineQuestion): { step: TimelineStep; words: string } {
	const { person, plan, visits } = question;
	if (person.completedAtMs !== null) return { step: 'completed', words: 'completed' };
	const attended = new Set(
		visits.filter(({ state }) => state === 'attended').map(({ visitNumber }) => visitNumber)
	);
	const isBooked = (number: number) =>
		visits.some(({ visitNumber, state }) => visitNumber === number && state === 'booked');
	const lastDone = plan.findLast(({ number }) => attended.has(number));
	const next = plan.find(({ number }) => !attended.has(number));
	if (plan.length > 0 && !next) return { step: 'completed', words: 'all visits done' };
	if (lastDone && lastDone.kind !== 'baseline') return describeNext(question, next);
	if (person.allocatedAtMs !== null) return describeNext(question, next);
	if (person.baselinePassedAtMs !== null) {
		const words = question.armCount > 1 ? 'ready to be allocated' : 'baseline passed';
		return { step: 'baseline done', words };
	}
	if (lastDone?.kind === 'baseline') return { step: 'baseline done', words: 'baseline done' };
	const baseline = plan.find(({ kind }) => kind === 'baseline');
	if (baseline && isBooked(baseline.number)) {
		return { step: 'baseline booked', words: 'baseline booked' };
	}
	if (person.consentedAtMs === null) return { step: 'enrolled', words: 'enrolled' };
	return { step: 'consented', words: `consented ${person.consent?.textVersion ?? ''}`.trim() };
}

function describeNext(
	{ plan }: TimelineQuestion,
	next: PlanVisit | undefined
): { step: TimelineStep; words: string } {
	if (next?.kind === 'retention') return { step: 'retention', words: 'retention due' };
	const practice = plan.filter(({ kind }) => kind === 'practice');
	const index = practice.findIndex(({ number }) => number === next?.number);
	if (index < 0) return { step: 'allocated', words: 'allocated' };
	const step = index === 0 ? 'allocated' : 'practice';
	return { step, words: `day ${index + 1} of ${practice.length}` };
}
