import { checkChain } from '$scheduler/booking/check-chain.ts';
import type { PlacedVisit } from '$scheduler/booking/types.ts';
import type { PersonPlan } from './load-person-plan';

/** Where a visit is to be. Without `staffId` whoever can be there is taken. */
export type Placement = {
	visitNumber: number;
	startMs: number;
	rigId: string;
	staffId?: string | undefined;
};

/**
 * The chain with some visits at new places. A visit that names nobody keeps its staff member where
 * they can be there, else gets the first who can.
 *
 * @throws RangeError when the plan has no such visit
 */
export function placeVisits(plan: PersonPlan, places: readonly Placement[]): PlacedVisit[] {
	return places.reduce((chain, placement) => placeVisit(plan, chain, placement), plan.chain);
}

function placeVisit(
	plan: PersonPlan,
	chain: readonly PlacedVisit[],
	placement: Placement
): PlacedVisit[] {
	const { visitNumber, startMs, rigId } = placement;
	const now = chain.find((one) => one.visitNumber === visitNumber);
	const others = chain.filter((one) => one !== now);
	const at = (staffId: string): PlacedVisit[] => {
		return [...others, { visitNumber, startMs, rigId, staffId }].sort(byNumber);
	};
	if (placement.staffId) return at(placement.staffId);
	const everybody = plan.problem.calendar.staff.map(({ id }) => id);
	const wished = now ? [now.staffId, ...everybody] : everybody;
	const able = wished.find((staffId) => !hasStaffFault(plan, at(staffId), visitNumber));
	return at(able ?? wished[0] ?? '');
}

function hasStaffFault(
	{ problem }: PersonPlan,
	chain: readonly PlacedVisit[],
	visitNumber: number
): boolean {
	return checkChain(problem, chain).some(
		(broken) =>
			broken.visitNumber === visitNumber &&
			(broken.rule === 'staff-hours' || broken.rule === 'staff-busy')
	);
}

function byNumber(a: PlacedVisit, b: PlacedVisit): number {
	return a.visitNumber - b.visitNumber;
}
