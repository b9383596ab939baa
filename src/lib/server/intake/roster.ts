export type RosterVisit = {
	/** The day on which the visit is booked, in the lab's zone; null when it is not booked. */
	bookedOn: string | null;
	/** Whether the visit has begun, or its set-up. */
	hasStarted: boolean;
	/** Blocks of the protocol's visit: number and planned trials. */
	blocks: { number: number; trials: number }[];
	/** Block numbers that are stored already. */
	stored: number[];
};

/** Who is expected with which trials. */
export type Roster = {
	/** Visits of each participant, by code and visit number. */
	people: Map<string, Map<number, RosterVisit>>;
	variables: { name: string; unit: string; min: number; max: number }[];
};

/** The number of the only visit of the study, which a file need not name; null when there are more. */
export function findOnlyVisit({ people }: Roster): number | null {
	const [numbers] = [...people.values()].map((visits) => [...visits.keys()]);
	return numbers?.length === 1 ? (numbers[0] ?? null) : null;
}
