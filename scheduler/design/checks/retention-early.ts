import { DESIGN_LIMITS, ROUNDING } from '../design-limits.ts';
import { nameVisit, type Design, type DesignBlock, type DesignVisit } from '../design.ts';
import type { Check, Finding } from '../finding.ts';
import type { JsonObject } from '../../policies/json-value.ts';
import type { DesignOperation, Repair } from '../repair.ts';
import { listBlockLists, sum, writeNumber } from '../walk-design.ts';

/** Purposes after which a test is one of performance, not of retention, until a day has passed. */
const PRACTICE = ['practice', 'region', 'shift', 'washout', 'adaptive'];
/** A chain by the clock may lose one hour where clocks change. */
const CLOCK_CHANGE_HOURS = 1;

/** Retention tests that may come less than a day after the last practice. */
export const checkRetentionTime: Check = (design) =>
	design.visits.flatMap((visit, index): Finding[] => {
		const shortest = findShortest(design, index).sort((a, b) => a.hours - b.hours);
		const kinds = [true, false].flatMap(
			(isSame) => shortest.find(({ isSameVisit }) => isSameVisit === isSame) ?? []
		);
		return kinds.flatMap((one) => describe(design, { visit, index }, one));
	});

function describe(
	design: Design,
	{ visit, index }: { visit: DesignVisit; index: number },
	{ hours, isSameVisit }: Shortest
): Finding[] {
	if (hours >= DESIGN_LIMITS.retentionHours - ROUNDING) return [];
	const lost = findLostHours(design);
	return [
		{
			key: `retention-early:v${index + 1}${isSameVisit ? ':same-visit' : ''}`,
			code: 'retention-early',
			place: { visit: index + 1 },
			field: isSameVisit ? `visits.${index}.blocks` : `visits.${index}.gapBefore.minHours`,
			numbers: { hours, limit: DESIGN_LIMITS.retentionHours, ...lost },
			severity: 'serious',
			text: `${nameVisit(visit, index)}: retention may come ${writeNumber(hours)} h after the last practice${describeLost(lost)}; it needs ${DESIGN_LIMITS.retentionHours} h, or it tests performance.`,
			...withRepair(isSameVisit ? moveOut(design, index) : lengthenGap(design, index, hours))
		}
	];
}

interface Shortest {
	readonly hours: number;
	readonly isSameVisit: boolean;
}

function withRepair(repair: Repair | undefined): { repair?: Repair } {
	return repair ? { repair } : {};
}

/** For each arm with a retention test in the visit, the shortest real hours since it last practised. */
function findShortest(design: Design, index: number): Shortest[] {
	return design.arms.flatMap(({ key }): Shortest[] => {
		const blocksOf = (visit: DesignVisit) => visit.armBlocks[key] ?? visit.blocks;
		const own = design.visits.slice(0, index + 1).map(blocksOf);
		const last = own.at(-1) ?? [];
		const test = last.findIndex(isRetention);
		if (test < 0) return [];
		if (last.slice(0, test).some(isPractice)) return [{ hours: 0, isSameVisit: true }];
		const before = own.slice(0, -1).findLastIndex((blocks) => blocks.some(isPractice));
		if (before < 0) return [];
		const gaps = design.visits
			.slice(before + 1, index + 1)
			.map((visit) => findShortestGap(design, visit));
		return gaps.some((gap) => gap === null)
			? []
			: [{ hours: sum(gaps.map((gap) => gap ?? 0)), isSameVisit: false }];
	});
}

/** Real hours between two visits at the least; null: not said yet. */
function findShortestGap(design: Design, { kind, gapBefore }: DesignVisit): number | null {
	const least = gapBefore?.minHours ?? null;
	if (least === null) return null;
	const { count, minHours } = design.booking.pauses;
	const mayPause = kind === 'practice' && (count ?? 0) > 0;
	const shortest = mayPause && minHours !== null ? Math.min(least, minHours) : least;
	const { byClockChange, byRelaxation } = findLostHours(design);
	return Math.max(0, shortest - byClockChange - byRelaxation);
}

/** Hours that a gap may lose beside its own rule. */
function findLostHours({ booking, relaxation }: Design) {
	const given = relaxation.filter(({ rule }) => rule === 'gap-shortest').map(({ by }) => by ?? 0);
	return {
		byClockChange: booking.dayMeaning === 'clock-time' ? CLOCK_CHANGE_HOURS : 0,
		byRelaxation: Math.max(0, ...given)
	};
}

function describeLost({ byClockChange, byRelaxation }: ReturnType<typeof findLostHours>): string {
	const parts = [
		...(byClockChange > 0 ? [`${byClockChange} h lost over a clock change`] : []),
		...(byRelaxation > 0 ? [`${writeNumber(byRelaxation)} h given way when no chain fits`] : [])
	];
	return parts.length > 0 ? ` (with ${parts.join(' and ')})` : '';
}

function lengthenGap(design: Design, index: number, hours: number): Repair | undefined {
	const visit = design.visits[index];
	const own = visit && findShortestGap(design, visit);
	if (!visit?.gapBefore || own === null || own === undefined) return undefined;
	const { byClockChange, byRelaxation } = findLostHours(design);
	const elsewhere = hours - own;
	const minHours = DESIGN_LIMITS.retentionHours - elsewhere + byClockChange + byRelaxation;
	const rising = (...values: (number | null)[]) => Math.max(...values.map((value) => value ?? 0));
	return {
		label: `Let at least ${writeNumber(minHours)} h pass`,
		operations: [
			{
				kind: 'set-value',
				path: ['visits', index, 'gapBefore'],
				value: {
					...{ ...visit.gapBefore, minHours: rising(minHours, visit.gapBefore.minHours) },
					targetHours: rising(minHours, visit.gapBefore.minHours, visit.gapBefore.targetHours),
					maxHours: rising(
						minHours,
						visit.gapBefore.minHours,
						visit.gapBefore.targetHours,
						visit.gapBefore.maxHours
					)
				} as JsonObject
			}
		]
	};
}

/** The test and what follows it as a visit of their own, a day later. */
function moveOut(design: Design, index: number) {
	const visit = design.visits[index];
	if (!visit) throw new RangeError(`there is no visit ${index + 1}`);
	const split = (blocks: readonly DesignBlock[]) => {
		const at = blocks.findIndex(
			(block, i) => isRetention(block) && blocks.slice(0, i).some(isPractice)
		);
		return at < 0 ? [[...blocks], []] : [blocks.slice(0, at), blocks.slice(at)];
	};
	const lists = listBlockLists(design, visit).map(({ list, blocks }) => ({
		list,
		before: split(blocks)[0] ?? [],
		after: split(blocks)[1] ?? []
	}));
	const common = lists.find(({ after }) => after.length > 0)?.after ?? [];
	const { byClockChange, byRelaxation } = findLostHours(design);
	const minHours = DESIGN_LIMITS.retentionHours + byClockChange + byRelaxation;
	const operations: DesignOperation[] = [
		...lists.map(({ list, before }): DesignOperation => ({
			...{ kind: 'set-blocks', visit: index, arm: list },
			blocks: before
		})),
		{
			...{ kind: 'insert-visit', at: index + 1 },
			visit: {
				...visit,
				...{ label: 'Retention', kind: 'retention' },
				gapBefore: { minHours, targetHours: minHours, maxHours: 2 * minHours, nightsBetween: 1 },
				blocks: common,
				armBlocks: Object.fromEntries(
					lists.flatMap(({ list, after }) =>
						list === null || after.length === 0 ? [] : [[list, after]]
					)
				)
			}
		}
	];
	return { label: 'Move the test to a visit a day later', operations };
}

function isRetention({ purpose }: DesignBlock): boolean {
	return purpose === 'retention';
}

function isPractice({ purpose }: DesignBlock): boolean {
	return PRACTICE.includes(purpose);
}
