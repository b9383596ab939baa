import { SLOT_MS } from '$scheduler/booking/candidate-starts.ts';
import { checkChain } from '$scheduler/booking/check-chain.ts';
import type { BookingProblem, PlacedVisit } from '$scheduler/booking/types.ts';

/**
 * Every chain of a small problem that keeps every rule, by trying all starts with all rigs and
 * staff and asking the checker. A chain's beginning is dropped as soon as it breaks a rule.
 */
export function listEveryChain(problem: BookingProblem, horizonEndMs: number): PlacedVisit[][] {
	let chains: PlacedVisit[][] = [[]];
	for (const { number } of problem.plan.visits) {
		const places = listPlaces(problem, number, horizonEndMs);
		chains = chains.flatMap((chain) =>
			places
				.map((place) => [...chain, place])
				.filter((longer) => checkChain(problem, longer).length === 0)
		);
	}
	return chains;
}

/** Starts a visit could have by itself, each with the first rig and staff member that can. */
function listPlaces(problem: BookingProblem, visitNumber: number, endMs: number): PlacedVisit[] {
	const places: PlacedVisit[] = [];
	const { rigs, staff } = problem.calendar;
	const pairs = rigs.flatMap((rig) => staff.map((one) => ({ rigId: rig.id, staffId: one.id })));
	for (
		let startMs = Math.ceil(problem.nowMs / SLOT_MS) * SLOT_MS;
		startMs < endMs;
		startMs += SLOT_MS
	) {
		const options = pairs.map((pair) => ({ visitNumber, startMs, ...pair }));
		const possible = options.find((place) => checkChain(problem, [place]).length === 0);
		if (possible) places.push(possible);
	}
	return places;
}
