import { findDayChain, type ChainGap, type ChainRules, type ChainVerdict } from '../day-chain.ts';
import { nameVisit, type Design } from '../design.ts';
import type { Check, Finding } from '../finding.ts';
import { repairDesign, type DesignOperation, type Repair } from '../repair.ts';
import { writeCount, writeNumber } from '../walk-design.ts';

const EVERY_DAY = [1, 2, 3, 4, 5, 6, 7];
/** A weekend between two visits at about the same time: Friday to Monday, with room for the clock. */
const WEEKEND = { minHours: 68, maxHours: 100 };
const LONGEST_DAYS = 28;
const PAUSES_MAX = 10;

/** Gaps that no calendar can keep. */
export const checkGaps: Check = (design) => {
	const swapped = findSwapped(design);
	if (swapped.length > 0) return swapped;
	const verdict = judge(design);
	if (verdict === null) return [];
	if (!verdict.ok) return [describeBroken(design, verdict)];
	return verdict.clockChangeAt === null ? [] : [describeChange(design, verdict.clockChangeAt + 1)];
};

/** The chain of the design by days; null: a number is missing, or there is no chain. */
function judge(design: Design, asksClocks = true): ChainVerdict | null {
	const { booking } = design;
	const { earliestMinute, latestMinute, sameTimeToleranceMinutes: tolerance } = booking;
	const gaps = design.visits.slice(1).map((visit, index): ChainGap | null => {
		const { minHours = null, maxHours = null, nightsBetween } = visit.gapBefore ?? {};
		if (minHours === null || maxHours === null) return null;
		return {
			rule: { minHours, maxHours, nightsBetween: nightsBetween ?? 0 },
			isAnchor: index === 0,
			mayPause: visit.kind === 'practice'
		};
	});
	const known = gaps.flatMap((gap) => gap ?? []);
	if (earliestMinute === null || latestMinute === null || tolerance === null) return null;
	if (known.length < gaps.length || known.length === 0 || booking.weekdays.length === 0)
		return null;
	return findDayChain(known, {
		windowMinutes: Math.max(0, latestMinute - earliestMinute),
		toleranceMinutes: tolerance,
		weekdays: booking.weekdays,
		pauses: readPauses(design),
		countsElapsed: asksClocks && booking.dayMeaning === 'elapsed-hours'
	});
}

function readPauses({ booking }: Design): ChainRules['pauses'] {
	const { count, minHours, maxHours } = booking.pauses;
	return { count: count ?? 0, minHours: minHours ?? 0, maxHours: maxHours ?? 0 };
}

/** A shortest gap above the longest one. */
function findSwapped(design: Design): Finding[] {
	return design.visits.flatMap((visit, index): Finding[] => {
		if (index === 0 || !visit.gapBefore) return [];
		const { minHours, maxHours, ...rest } = visit.gapBefore;
		if (minHours === null || maxHours === null || minHours <= maxHours) return [];
		const value = { ...rest, minHours: maxHours, targetHours: maxHours, maxHours: minHours };
		const target = rest.targetHours;
		const isInside = target !== null && target >= maxHours && target <= minHours;
		return [
			{
				key: `impossible-gap:v${index + 1}`,
				code: 'impossible-gap',
				place: { visit: index + 1 },
				field: `visits.${index}.gapBefore.minHours`,
				numbers: { minHours, maxHours },
				severity: 'serious',
				text: `${nameVisit(visit, index)} follows after at least ${writeNumber(minHours)} h, but at most ${writeNumber(maxHours)} h.`,
				repair: {
					label: `Let ${writeNumber(maxHours)} to ${writeNumber(minHours)} h pass`,
					operations: [
						{
							kind: 'set-value',
							path: ['visits', index, 'gapBefore'],
							value: { ...value, ...(isInside ? { targetHours: target } : {}) }
						}
					]
				}
			}
		];
	});
}

function describeBroken(
	design: Design,
	{ gap, reason }: Extract<ChainVerdict, { ok: false }>
): Finding {
	const index = gap + 1;
	const visit = design.visits[index];
	const rule = visit?.gapBefore;
	const { count } = readPauses(design);
	const [least, most] = [rule?.minHours ?? 0, rule?.maxHours ?? 0];
	const nights = rule?.nightsBetween ?? 0;
	const hours = `${writeNumber(least)} to ${writeNumber(most)} h`;
	const why =
		reason === 'hours'
			? `no number of days gives ${hours} with ${writeCount(nights, 'night')} between, starts ${describeWindow(design)}`
			: `no week lets every visit up to here keep its gap (${hours}) on ${writeCount(design.booking.weekdays.length, 'weekday')} with ${writeCount(count, 'longer gap')}, starts ${describeWindow(design)}`;
	const repair = findRepair(design, index);
	return {
		key: `impossible-gap:v${index + 1}`,
		code: 'impossible-gap',
		place: { visit: index + 1 },
		field: `visits.${index}.gapBefore.maxHours`,
		numbers: {
			...{ minHours: least, maxHours: most, nightsBetween: nights, pauses: count, reason },
			weekdays: design.booking.weekdays
		},
		severity: 'serious',
		text: `${visit ? nameVisit(visit, index) : 'The chain'}: ${why}.`,
		...(repair ? { repair } : {})
	};
}

function describeWindow({ booking }: Design): string {
	const clock = (minute: number | null) =>
		`${String(Math.floor((minute ?? 0) / 60)).padStart(2, '0')}:${String((minute ?? 0) % 60).padStart(2, '0')}`;
	const { earliestMinute, latestMinute, sameTimeToleranceMinutes } = booking;
	return `from ${clock(earliestMinute)} to ${clock(latestMinute)} and at most ${sameTimeToleranceMinutes ?? 0} min from the first`;
}

/** The first of the usual remedies that lets the chain go on past this gap. */
function findRepair(design: Design, index: number): Repair | null {
	const helps = (repair: Repair): boolean => {
		const verdict = judge(repairDesign(design, repair), false);
		return verdict !== null && (verdict.ok || verdict.gap + 1 > index);
	};
	for (const repair of listRemedies(design, index)) if (helps(repair)) return repair;
	return null;
}

function* listRemedies(design: Design, index: number): Generator<Repair> {
	const gap = design.visits[index]?.gapBefore;
	const set = (path: DesignOperation & { kind: 'set-value' }) => [path];
	for (let nights = (gap?.nightsBetween ?? 0) - 1; nights >= 0; nights--) {
		yield {
			label: `Ask for ${writeCount(nights, 'night')} between`,
			operations: set({
				...{ kind: 'set-value', path: ['visits', index, 'gapBefore', 'nightsBetween'] },
				value: nights
			})
		};
	}
	const pauses = readPauses(design);
	const range = pauses.maxHours > 0 ? pauses : { ...pauses, ...WEEKEND };
	for (let count = pauses.count + 1; count <= Math.min(PAUSES_MAX, pauses.count + 4); count++) {
		yield {
			label: `Allow ${writeCount(count, 'longer gap')} of ${writeNumber(range.minHours)} to ${writeNumber(range.maxHours)} h`,
			operations: set({
				...{ kind: 'set-value', path: ['booking', 'pauses'] },
				value: { ...range, count }
			})
		};
	}
	for (let days = Math.max(1, gap?.nightsBetween ?? 1); days <= LONGEST_DAYS; days++) {
		const value = {
			...{ ...gap, minHours: 24 * days - 4, targetHours: 24 * days, maxHours: 24 * days + 4 },
			nightsBetween: gap?.nightsBetween ?? null
		};
		yield {
			label: `Let ${value.minHours} to ${value.maxHours} h pass`,
			operations: set({ kind: 'set-value', path: ['visits', index, 'gapBefore'], value })
		};
	}
	yield {
		label: 'Allow every weekday',
		operations: set({ kind: 'set-value', path: ['booking', 'weekdays'], value: EVERY_DAY })
	};
}

function describeChange(design: Design, index: number): Finding {
	const visit = design.visits[index];
	const [least, most] = [visit?.gapBefore?.minHours ?? 0, visit?.gapBefore?.maxHours ?? 0];
	const tolerance = design.booking.sameTimeToleranceMinutes ?? 0;
	return {
		key: `impossible-gap:v${index + 1}:clock-change`,
		code: 'impossible-gap',
		place: { visit: index + 1 },
		field: 'booking.dayMeaning',
		numbers: { minHours: least, maxHours: most, toleranceMinutes: tolerance },
		severity: 'minor',
		text: `${visit ? nameVisit(visit, index) : 'The chain'}: where clocks change in the gap, ${writeNumber(least)} to ${writeNumber(most)} h that pass cannot be kept with starts at most ${tolerance} min apart: nobody can be booked over those nights.`,
		repair: {
			label: 'Count hours by the clock on the wall',
			operations: [{ kind: 'set-value', path: ['booking', 'dayMeaning'], value: 'clock-time' }]
		}
	};
}
