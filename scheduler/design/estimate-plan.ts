import { computePowerWithLosses } from '../power/two-sample-t.ts';
import { listArmBurdens, type ArmBurden } from './burden.ts';
import type { Design } from './design.ts';

/** How much of the hours that rigs and staff have can be filled: people do not come like a tide. Judgement. */
const FILLED_SHARE = 0.7;

/** A whole study in one view; an estimate, no booking. */
export interface PlanEstimate {
	readonly arms: readonly ArmBurden[];
	/** Null: the protocol does not say how many. */
	readonly people: number | null;
	readonly rigHours: number | null;
	/** Hours a week in which a rig and somebody to run it are there. */
	readonly weeklyHours: number;
	/** From the first visit to the last of the last person, at the wanted gaps. */
	readonly weeks: number | null;
	/** Power of the primary comparison with what is lost; null: not known yet. */
	readonly power: number | null;
}

/**
 * People, hours of the rigs, and the earliest finish, as far as they are known.
 *
 * Units:   hours, weeks; power as a share.
 * Method:  all hours of the rigs over what the lab has a week (the lesser of rigs and staff, filled to
 *          seven tenths), and the longest chain at its wanted gaps behind it.
 * Source:  judgement for the share; power as on the power page. Accuracy: an estimate; the dry run books.
 */
export function estimatePlan(
	design: Design,
	lab: { readonly rigHoursWeekly: number; readonly staffHoursWeekly: number }
): PlanEstimate {
	const arms = listArmBurdens(design);
	const perArm = design.comparison?.peoplePerArm ?? null;
	const people = perArm === null ? null : perArm * arms.length;
	const rigHours =
		perArm === null ? null : arms.reduce((sum, arm) => sum + arm.rigHours * perArm, 0);
	const weeklyHours = Math.min(lab.rigHoursWeekly, lab.staffHoursWeekly);
	const chainWeeks = Math.max(0, ...arms.map(({ spanDays }) => spanDays.target)) / 7;
	const weeks =
		rigHours === null || weeklyHours <= 0
			? null
			: rigHours / (weeklyHours * FILLED_SHARE) + chainWeeks;
	return { arms, people, rigHours, weeklyHours, weeks, power: findPower(design) };
}

function findPower({ comparison }: Design): number | null {
	if (!comparison) return null;
	const { peoplePerArm: n, effectD, alpha, sides, peopleLostShare, effectLostShare } = comparison;
	const isKnown = [n, effectD, alpha, peopleLostShare, effectLostShare].every(Number.isFinite);
	if (!isKnown || Number(n) * (1 - Number(peopleLostShare)) < 2) return null;
	return computePowerWithLosses(
		{
			...{ effectSize: Number(effectD), n1: Number(n), n2: Number(n), alpha: Number(alpha) },
			sides: sides === 1 ? 1 : 2
		},
		{ peopleLossShare: Number(peopleLostShare), effectLossShare: Number(effectLostShare) }
	);
}
