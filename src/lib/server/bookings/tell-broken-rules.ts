import type { BrokenRule } from '$scheduler/booking/broken-rule.ts';
import { checkChain } from '$scheduler/booking/check-chain.ts';
import { describeBrokenRule } from '$scheduler/booking/describe-broken-rule.ts';
import type { DescribeContext } from '$scheduler/booking/booking-words.ts';
import type { PlacedVisit } from '$scheduler/booking/types.ts';
import type { PersonPlan } from './load-person-plan';

/** A broken rule as pages show it. */
export type ToldRule = { rule: string; visitNumber: number; short: string; sentence: string };

/** The names and labels that sentences about this plan use. */
export function describeContext({
	problem,
	lab
}: Pick<PersonPlan, 'problem' | 'lab'>): DescribeContext {
	const rigs = lab.rigs.map(({ id, name }) => [id, name] as const);
	return {
		zone: problem.calendar.zone,
		visits: problem.plan.visits,
		names: new Map([...rigs, ...lab.roomNames, ...lab.staffNames])
	};
}

export function tellBrokenRules(plan: PersonPlan, broken: readonly BrokenRule[]): ToldRule[] {
	const context = describeContext(plan);
	return broken.map((one) => {
		const { short, sentence } = describeBrokenRule(one, context);
		return { rule: one.rule, visitNumber: one.visitNumber, short, sentence };
	});
}

/**
 * The rules that a changed chain breaks. The whole chain is judged; a rule that the chain as it
 * stands breaks with the very same values does not count against a change elsewhere.
 */
export function findNewBreaks(
	{ problem, chain: now }: PersonPlan,
	changed: readonly PlacedVisit[]
): BrokenRule[] {
	const before = new Set(checkChain(problem, now).map((broken) => JSON.stringify(broken)));
	return checkChain(problem, changed).filter((broken) => !before.has(JSON.stringify(broken)));
}
