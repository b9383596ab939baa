import { MINUTE_MS } from './local-date.ts';
import type { BookingProblem, Interval, PlacedVisit, VisitPlan } from './types.ts';

/** A visit together with its row of the plan. */
export type PlannedVisit = { plan: VisitPlan; placed: PlacedVisit };

/**
 * The visits of a chain in the order of the plan, each with its row.
 * @throws RangeError when a visit number is not in the plan or stands twice
 */
export function pairWithPlan(
	{ plan }: Pick<BookingProblem, 'plan'>,
	chain: readonly PlacedVisit[]
): PlannedVisit[] {
	const byNumber = new Map(plan.visits.map((visit) => [visit.number, visit]));
	const seen = new Set<number>();
	const paired = chain.map((placed) => {
		const row = byNumber.get(placed.visitNumber);
		if (!row) throw new RangeError(`the plan has no visit ${placed.visitNumber}`);
		if (seen.has(row.number)) throw new RangeError(`visit ${row.number} stands twice`);
		seen.add(row.number);
		return { plan: row, placed };
	});
	return paired.sort((a, b) => a.plan.number - b.plan.number);
}

/** From the start of the set-up to the end of the clean-up. */
export function occupiedTime(plan: VisitPlan, startMs: number): Interval {
	return {
		fromMs: startMs - plan.setupMinutes * MINUTE_MS,
		toMs: startMs + (plan.minutes + plan.cleanupMinutes) * MINUTE_MS
	};
}

/** The visit itself, while the person is there. */
export function visitTime(plan: VisitPlan, startMs: number): Interval {
	return { fromMs: startMs, toMs: startMs + plan.minutes * MINUTE_MS };
}
