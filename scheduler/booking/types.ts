/** ISO weekday of a lab's or a person's local calendar: 1 is Monday, 7 is Sunday. */
export type Weekday = 1 | 2 | 3 | 4 | 5 | 6 | 7;

/** A local calendar date, '2027-03-28'. */
export type LocalDate = string;

/** Half-open stretch of time, [fromMs, toMs), epoch milliseconds. */
export type Interval = { fromMs: number; toMs: number };

/**
 * A stretch of every such weekday by the local clock, [fromMinute, toMinute), minutes since local
 * midnight, 0 to 1440. A stretch over midnight is two windows that meet at 1440 and 0.
 */
export type WeeklyWindow = { weekday: Weekday; fromMinute: number; toMinute: number };

/** How a visit must follow the one before it. Hours run from start to start. */
export type GapRule = {
	minHours: number;
	targetHours: number;
	maxHours: number;
	/** At least so many local midnights (lab's zone) lie between the two starts. */
	nightsBetween: number;
	/** Longer gaps the chain may hold: this gap may be one while fewer than `count` were used. */
	allowedPauses: { count: number; minHours: number; maxHours: number };
	/**
	 * What an hour means where clocks change: 'elapsed' (the default) is time that passed, 'clock'
	 * is the difference of the clocks on the wall, so that "same time tomorrow" is always 24.
	 */
	hoursMean?: 'elapsed' | 'clock';
};

export type VisitKind = 'baseline' | 'practice' | 'retention' | 'transfer' | 'other';

/** One visit of the protocol. Every arm has the same plan. */
export type VisitPlan = {
	/** 1 is the first visit; ascending, no two alike. */
	number: number;
	/** What people call it: 'Day 3', 'Retention'. */
	label: string;
	kind: VisitKind;
	/** Length of the visit itself, during which the person is there. */
	minutes: number;
	/** Rig, room and staff are also taken this long before and after. */
	setupMinutes: number;
	cleanupMinutes: number;
	/** Null for the first visit. */
	gapBefore: GapRule | null;
};

/** When a visit may start, by the lab's clock. */
export type ClockWindow = {
	/** Earliest and latest start (both included), minutes since midnight; earliest > latest runs over midnight. */
	earliestMinute: number;
	latestMinute: number;
	/** A person's visits start within so many minutes (round the clock) of their first; null: no rule. */
	sameTimeToleranceMinutes: number | null;
};

/** Everything the protocol says about when visits may be. */
export type ChainPlan = {
	visits: readonly VisitPlan[];
	clockWindow: ClockWindow;
	/** Weekdays of the lab's calendar on which a visit may start. */
	weekdays: readonly Weekday[];
};

/** A rig and when it runs. `busy`: other people's occupied time (set-up to clean-up), repairs. */
export type RigCalendar = {
	id: string;
	/** A room holds one visit at a time; null when the rig needs none. */
	roomId: string | null;
	hours: readonly WeeklyWindow[];
	busy: readonly Interval[];
};

export type StaffCalendar = {
	id: string;
	hours: readonly WeeklyWindow[];
	busy: readonly Interval[];
};

/** Occupied time of a room by visits on any rig or by anything else. */
export type RoomCalendar = { id: string; busy: readonly Interval[] };

/**
 * The lab as one person's booking sees it. The busy times must not hold the visits of the chain
 * that is being judged or moved: the chain itself is given apart.
 */
export type LabCalendar = {
	/** IANA name; weekdays, nights, clock window and holidays are meant in this zone. */
	zone: string;
	/** Local dates on which the lab is closed: no visit starts on them. */
	holidays: readonly LocalDate[];
	rigs: readonly RigCalendar[];
	rooms: readonly RoomCalendar[];
	staff: readonly StaffCalendar[];
};

export type Participant = {
	/** IANA name of the zone in which availability is meant. */
	zone: string;
	/** Weekly windows in the person's own zone; null: no limits stated. A visit must lie inside one. */
	availability: readonly WeeklyWindow[] | null;
	/** Visits outside this chain and times the person named as impossible. */
	busy: readonly Interval[];
	/** No visit starts before it; null: no such limit. */
	earliestStartMs: number | null;
};

/** One visit of a chain at its place. */
export type PlacedVisit = {
	visitNumber: number;
	startMs: number;
	rigId: string;
	staffId: string;
	/**
	 * True for a visit that is over or may not be moved: it counts for the gaps of others, but is
	 * not judged itself.
	 */
	fixed?: boolean;
};

/** What both finder and checker need beside the chain. */
export type BookingProblem = {
	plan: ChainPlan;
	calendar: LabCalendar;
	participant: Participant;
	/** The moment of asking; nothing can start before it. */
	nowMs: number;
};
