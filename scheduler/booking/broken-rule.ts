import type { Interval, LocalDate, VisitKind, Weekday } from './types.ts';

/** What a broken rule says about two visits and the gap between them. */
type GapFacts = {
	previousVisitNumber: number;
	kind: VisitKind;
	/** By the rule's own meaning of hours. */
	gapHours: number;
	minHours: number;
	maxHours: number;
};

/** The values that show each rule broken. */
type FactsByRule = {
	'gap-too-short': GapFacts;
	'gap-too-long': GapFacts;
	'pause-used-up': GapFacts & { allowedCount: number; usedCount: number };
	nights: { previousVisitNumber: number; nights: number; minNights: number };
	order: { previousVisitNumber: number; previousEndMs: number };
	'clock-window': { startMinute: number; earliestMinute: number; latestMinute: number };
	'same-time': {
		startMinute: number;
		firstStartMinute: number;
		differenceMinutes: number;
		toleranceMinutes: number;
	};
	weekday: { weekday: Weekday; allowedWeekdays: readonly Weekday[] };
	holiday: { date: LocalDate };
	'rig-hours': { rigId: string; occupied: Interval };
	'rig-busy': { rigId: string; busy: Interval };
	'room-busy': { roomId: string; busy: Interval };
	'staff-hours': { staffId: string; occupied: Interval };
	'staff-busy': { staffId: string; busy: Interval };
	'person-busy': { busy: Interval };
	/** The zone is the person's. */
	availability: { visit: Interval; zone: string };
	'before-earliest-start': { earliestStartMs: number };
	'in-the-past': { nowMs: number };
	'clock-change-gap': { date: LocalDate; minute: number };
};

export type RuleName = keyof FactsByRule;

/** One kind of broken rule. */
export type BrokenRuleOf<Rule extends RuleName> = {
	[One in Rule]: {
		rule: One;
		visitNumber: number;
		/** The start that was judged; null only for a local time that does not exist. */
		startMs: number | null;
	} & FactsByRule[One];
}[Rule];

/** One rule that a chain breaks, with the values that show it. Tell them apart by `rule`. */
export type BrokenRule = BrokenRuleOf<RuleName>;

/** Every rule, in the order in which the first broken one is named. */
export const RULE_ORDER = [
	'clock-change-gap',
	'in-the-past',
	'before-earliest-start',
	'order',
	'holiday',
	'weekday',
	'nights',
	'gap-too-short',
	'gap-too-long',
	'pause-used-up',
	'clock-window',
	'same-time',
	'availability',
	'person-busy',
	'rig-hours',
	'rig-busy',
	'room-busy',
	'staff-hours',
	'staff-busy'
] as const satisfies readonly RuleName[];
