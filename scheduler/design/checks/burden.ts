import { listArmBurdens, type ArmBurden, type VisitBurden } from '../burden.ts';
import { DESIGN_LIMITS, ROUNDING } from '../design-limits.ts';
import { nameVisit, type Design, type DesignBlock } from '../design.ts';
import type { Check, CheckContext, Finding } from '../finding.ts';
import type { DesignOperation, Repair } from '../repair.ts';
import { joinWords, listBlockLists, nameArm, writeCount, writeNumber } from '../walk-design.ts';

interface Most {
	readonly burden: VisitBurden;
	readonly arms: readonly string[];
}

/** Visits and chains that ask more of people, or of a rig, than the limits allow. */
export const checkBurden: Check = (design, context) => {
	const arms = listArmBurdens(design);
	return [
		...design.visits.flatMap((_, index) => [
			...checkMinutes(design, context, index),
			...checkFit(design, arms, index),
			...checkTrials(design, context, { arms, index })
		]),
		...checkChain(design, arms)
	];
};

/** The narrowest of the protocol's own limit and what at least one rig of the lab allows. */
function findLimit(
	own: number | null,
	{ rigs }: CheckContext,
	name: 'minutesPerVisit' | 'trialsPerVisit'
): { limit: number; of: string } | null {
	const widest = rigs.reduce<CheckContext['rigs'][number] | null>(
		(best, rig) => (best && best[name] >= rig[name] ? best : rig),
		null
	);
	if (widest && (own === null || widest[name] < own)) {
		return { limit: widest[name], of: `rig ${widest.name}` };
	}
	return own === null ? null : { limit: own, of: 'the protocol' };
}

function checkMinutes(design: Design, context: CheckContext, index: number): Finding[] {
	const visit = design.visits[index];
	const limit = findLimit(design.limits.minutesPerVisit, context, 'minutesPerVisit');
	const minutes = visit?.minutes ?? null;
	if (!visit || !limit || minutes === null || minutes <= limit.limit) return [];
	return [
		{
			key: `burden:v${index + 1}:minutes`,
			code: 'burden',
			place: { visit: index + 1 },
			field: `visits.${index}.minutes`,
			numbers: { minutes, limit: limit.limit },
			severity: 'serious',
			text: `${nameVisit(visit, index)} lasts ${minutes} min; the limit of ${limit.of} is ${limit.limit} min a visit.`,
			repair: {
				label: `Reserve ${limit.limit} min`,
				operations: [{ kind: 'set-value', path: ['visits', index, 'minutes'], value: limit.limit }]
			}
		}
	];
}

/** Whether the blocks fit into the minutes that are reserved. */
function checkFit(design: Design, arms: readonly ArmBurden[], index: number): Finding[] {
	const visit = design.visits[index];
	const most = findMost(arms, index, ({ blockMinutes }) => blockMinutes);
	if (!visit || visit.minutes === null || !most) return [];
	const { blockMinutes } = most.burden;
	if (blockMinutes <= visit.minutes + ROUNDING) return [];
	const needed = Math.ceil(blockMinutes - ROUNDING);
	return [
		{
			key: `burden:v${index + 1}:fit`,
			code: 'burden',
			place: { visit: index + 1 },
			field: `visits.${index}.minutes`,
			numbers: { minutes: blockMinutes, limit: visit.minutes },
			severity: 'serious',
			text: `${nameVisit(visit, index)}: the blocks of ${joinWords(most.arms)} take ${writeNumber(blockMinutes)} min (${writeNumber(most.burden.trialMinutes)} trials, ${writeNumber(most.burden.trialRestMinutes + most.burden.blockRestMinutes)} rest); ${visit.minutes} min are reserved.`,
			repair: {
				label: `Reserve ${needed} min`,
				operations: [{ kind: 'set-value', path: ['visits', index, 'minutes'], value: needed }]
			}
		}
	];
}

function checkTrials(
	design: Design,
	context: CheckContext,
	{ arms, index }: { arms: readonly ArmBurden[]; index: number }
): Finding[] {
	const visit = design.visits[index];
	const limit = findLimit(design.limits.trialsPerVisit, context, 'trialsPerVisit');
	const most = findMost(arms, index, ({ trials }) => trials);
	if (!visit || !limit || !most || most.burden.trials <= limit.limit) return [];
	return [
		{
			key: `burden:v${index + 1}:trials`,
			code: 'burden',
			place: { visit: index + 1 },
			field: `visits.${index}.blocks`,
			numbers: { trials: most.burden.trials, limit: limit.limit },
			severity: 'serious',
			text: `${nameVisit(visit, index)}: ${joinWords(most.arms)} run ${writeCount(most.burden.trials, 'trial')}; the limit of ${limit.of} is ${limit.limit} a visit.`,
			repair: shortenBlocks(design, index, limit.limit)
		}
	];
}

/** Blocks of all arms shortened alike, so that the fullest list keeps the limit. */
function shortenBlocks(design: Design, index: number, limit: number): Repair {
	const visit = design.visits[index];
	const lists = visit ? listBlockLists(design, visit) : [];
	const fullest = Math.max(
		...lists.map(({ blocks }) => blocks.reduce((all, { trials }) => all + (trials ?? 0), 0))
	);
	const shorten = (block: DesignBlock): DesignBlock => {
		if (block.purpose === 'rest' || block.trials === null) return block;
		const trials = Math.max(1, Math.floor((block.trials * limit) / fullest));
		return { ...block, trials };
	};
	return {
		label: `Shorten the blocks to ${limit} trials`,
		operations: lists.map(({ list, blocks }): DesignOperation => ({
			...{ kind: 'set-blocks', visit: index, arm: list },
			blocks: keepFirst(blocks.map(shorten), limit)
		}))
	};
}

/** Blocks from the front as far as the limit goes: many tiny blocks cannot be shortened enough. */
function keepFirst(blocks: readonly DesignBlock[], limit: number): DesignBlock[] {
	let left = limit;
	return blocks.filter(({ trials }) => (left -= trials ?? 0) >= 0);
}

function findMost(
	arms: readonly ArmBurden[],
	index: number,
	measure: (burden: VisitBurden) => number
): Most | null {
	const rows = arms.flatMap(({ arm, visits }) => {
		const burden = visits[index];
		return burden ? [{ arm, burden }] : [];
	});
	const most = Math.max(...rows.map(({ burden }) => measure(burden)));
	const fullest = rows.filter(({ burden }) => measure(burden) === most);
	const [first] = fullest;
	return first ? { burden: first.burden, arms: fullest.map(({ arm }) => nameArm(arm)) } : null;
}

function checkChain(design: Design, arms: readonly ArmBurden[]): Finding[] {
	const count = design.visits.length;
	const hours = Math.max(0, ...arms.map(({ personHours }) => personHours));
	const said = (
		name: 'visits' | 'hours',
		{ value, limit }: { value: number; limit: number },
		text: string
	): Finding[] =>
		value <= limit
			? []
			: [
					{
						key: `burden:${name}`,
						code: 'burden',
						place: {},
						field: 'visits',
						numbers: { [name]: value, limit },
						severity: 'minor',
						text
					}
				];
	return [
		...said(
			'visits',
			{ value: count, limit: DESIGN_LIMITS.visits },
			`${count} visits are asked of a person; above ${DESIGN_LIMITS.visits} say why so many are needed.`
		),
		...said(
			'hours',
			{ value: hours, limit: DESIGN_LIMITS.rigHours },
			`${writeNumber(hours)} h at the rig are asked of a person; above ${DESIGN_LIMITS.rigHours} h say why so many are needed.`
		)
	];
}
