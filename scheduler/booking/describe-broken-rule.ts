import {
	formatClock,
	formatDate,
	formatHours,
	formatLength,
	formatMoment,
	formatSpan,
	labelOf,
	nameOf,
	weekdayName,
	type DescribeContext
} from './booking-words.ts';
import type { BrokenRule, BrokenRuleOf, RuleName } from './broken-rule.ts';

export type RuleDescription = {
	/** Two or three words, for a place on the grid: 'retention window'. */
	short: string;
	/** The rule's name and what is wrong, in two or three sentences. */
	sentence: string;
};

/**
 * A broken rule in plain words, with its numbers and units.
 *
 * Shapes: broken rule and context in, words out. Units: hours, minutes, clock times of the lab.
 * Accuracy: hours to two decimals; scheduler/booking/describe-broken-rule.test.ts.
 * @throws RangeError when the zone is unknown
 * @example describeBrokenRule(broken, context).sentence
 * // 'Retention window. Day 7, Thu 25 March 12:30, would come 142.5 h later; the protocol wants
 * // 144 to 192 h.'
 */
export function describeBrokenRule(broken: BrokenRule, context: DescribeContext): RuleDescription {
	const { short, name, text } = tell(broken, context);
	return { short, sentence: `${name}. ${text}` };
}

type Telling = { short: string; name: string; text: string };

function tell<Rule extends RuleName>(
	broken: BrokenRuleOf<Rule>,
	context: DescribeContext
): Telling {
	return TELLINGS[broken.rule](broken, context);
}

type Tellings = {
	[Rule in RuleName]: (broken: BrokenRuleOf<Rule>, context: DescribeContext) => Telling;
};

const TELLINGS: Tellings = {
	'gap-too-short': tellGap,
	'gap-too-long': tellGap,
	'pause-used-up': (broken, context) => {
		const isOne = broken.allowedCount === 1;
		const what = isOne ? 'the one longer gap' : `the ${broken.allowedCount} longer gaps`;
		const used = `${what} a chain may hold ${isOne ? 'is' : 'are'} used`;
		const text = `${gapWords(broken, context)}, and ${used}.`;
		return { short: 'pause used', name: 'Pause used up', text };
	},
	nights: ({ visitNumber, previousVisitNumber, nights, minNights }, context) => {
		const [visit, before] = [labelOf(visitNumber, context), labelOf(previousVisitNumber, context)];
		const count =
			nights === 0 ? 'No night lies' : nights === 1 ? '1 night lies' : `${nights} nights lie`;
		const text = `${count} between ${before} and ${visit}; the protocol wants at least ${minNights}.`;
		return { short: 'night between', name: 'Night between', text };
	},
	order: ({ visitNumber, previousVisitNumber, previousEndMs }, context) => {
		const [visit, before] = [labelOf(visitNumber, context), labelOf(previousVisitNumber, context)];
		const end = formatMoment(previousEndMs, context.zone);
		const text = `${visit} would start before ${before} ends, ${end}.`;
		return { short: 'order of days', name: 'Order of days', text };
	},
	'clock-window': ({ visitNumber, startMinute, earliestMinute, latestMinute }, context) => {
		const window = `${formatClock(earliestMinute)} to ${formatClock(latestMinute)}`;
		const start = `${labelOf(visitNumber, context)} would start at ${formatClock(startMinute)}`;
		const text = `${start}; the protocol wants starts from ${window}.`;
		return { short: 'hours of the day', name: 'Hours of the day', text };
	},
	'same-time': (broken, context) => {
		const { visitNumber, differenceMinutes, firstStartMinute, toleranceMinutes } = broken;
		const off = `${formatLength(differenceMinutes)} off their ${formatClock(firstStartMinute)}`;
		const text = `${labelOf(visitNumber, context)} would be ${off}; the limit is ${formatLength(toleranceMinutes)}.`;
		return { short: 'own clock', name: 'Own clock', text };
	},
	weekday: ({ visitNumber, weekday, allowedWeekdays }, context) => {
		const days = allowedWeekdays.map(weekdayName).join(', ');
		const text = `${labelOf(visitNumber, context)} would fall on a ${weekdayName(weekday)}; the protocol wants ${days}.`;
		return { short: 'weekday', name: 'Weekday', text };
	},
	holiday: ({ date }) => {
		const text = `The lab is closed on ${formatDate(date)}.`;
		return { short: 'closed', name: 'Closed', text };
	},
	'rig-hours': ({ rigId, occupied }, context) => {
		const span = `${formatSpan(occupied, context.zone)}, set-up and clean-up included`;
		const text = `${nameOf(rigId, context)} does not run for all of ${span}.`;
		return { short: 'rig hours', name: 'Rig hours', text };
	},
	'rig-busy': ({ rigId, busy }, context) => {
		const text = `${nameOf(rigId, context)} is taken from ${formatSpan(busy, context.zone)}.`;
		return { short: 'rig taken', name: 'Rig taken', text };
	},
	'room-busy': ({ roomId, busy }, context) => {
		const text = `${nameOf(roomId, context)} is taken from ${formatSpan(busy, context.zone)}.`;
		return { short: 'room taken', name: 'Room taken', text };
	},
	'staff-hours': ({ staffId, occupied }, context) => {
		const span = `${formatSpan(occupied, context.zone)}, set-up and clean-up included`;
		const text = `${nameOf(staffId, context)} is not on duty for all of ${span}.`;
		return { short: 'staff hours', name: 'Staff hours', text };
	},
	'staff-busy': ({ staffId, busy }, context) => {
		const text = `${nameOf(staffId, context)} is taken from ${formatSpan(busy, context.zone)}.`;
		return { short: 'staff taken', name: 'Staff taken', text };
	},
	'person-busy': ({ busy }, context) => {
		const text = `This person is taken from ${formatSpan(busy, context.zone)}.`;
		return { short: 'they cannot', name: 'They cannot', text };
	},
	availability: ({ visit, zone }, context) => {
		const theirs = zone === context.zone ? '' : ` (${formatSpan(visit, zone)} on their clock)`;
		const span = `${formatSpan(visit, context.zone)}${theirs}`;
		const text = `${span} is not inside the hours this person gave.`;
		return { short: 'they cannot', name: 'They cannot', text };
	},
	'before-earliest-start': ({ visitNumber, earliestStartMs }, context) => {
		const earliest = formatMoment(earliestStartMs, context.zone);
		const text = `${labelOf(visitNumber, context)} would start before this person's earliest start, ${earliest}.`;
		return { short: 'earliest start', name: 'Earliest start', text };
	},
	'in-the-past': ({ visitNumber, nowMs }, context) => {
		const now = formatMoment(nowMs, context.zone);
		const text = `${labelOf(visitNumber, context)} would start before now, ${now}.`;
		return { short: 'over', name: 'Already over', text };
	},
	'clock-change-gap': ({ date, minute }) => {
		const time = formatClock(minute);
		const text = `On ${formatDate(date)} the clocks jump over ${time}. Choose another time.`;
		return { short: 'no such time', name: 'No such time', text };
	}
};

function tellGap(
	broken: BrokenRuleOf<'gap-too-short' | 'gap-too-long'>,
	context: DescribeContext
): Telling {
	const { kind, minHours, maxHours } = broken;
	const text = `${gapWords(broken, context)}.`;
	if (kind === 'retention') return { short: 'retention window', name: 'Retention window', text };
	if (kind === 'transfer') return { short: 'transfer window', name: 'Transfer window', text };
	const range = `${formatHours(minHours)}–${formatHours(maxHours)}`;
	return { short: `gap ${range} h`, name: 'Gap in hours', text };
}

/** 'Day 7, Thu 25 March 12:30, would come 142.5 h later; the protocol wants 144 to 192 h'. */
function gapWords(
	broken: BrokenRuleOf<'gap-too-short' | 'gap-too-long' | 'pause-used-up'>,
	context: DescribeContext
): string {
	const { visitNumber, startMs, gapHours, minHours, maxHours } = broken;
	const at = startMs === null ? '' : `, ${formatMoment(startMs, context.zone)},`;
	const comes = `${labelOf(visitNumber, context)}${at} would come ${formatHours(gapHours)} h later`;
	return `${comes}; the protocol wants ${formatHours(minHours)} to ${formatHours(maxHours)} h`;
}
