import type { MissedDay, RelaxationStep } from '$scheduler/protocol/booking-rules';
import type { ProtocolContent } from '$scheduler/protocol/protocol-content';
import { writeClockText } from './clock-text';
import { pathsIn, type ProtocolLine } from './protocol-line';

const weekdayNames = ['Mon', 'Tue', 'Wed', 'Thu', 'Fri', 'Sat', 'Sun'];
const pausePaths = pathsIn('booking.pauses', ['count', 'minHours', 'maxHours']);

/** When visits may start, what a gap means, and what gives way when nothing fits. */
export function describeBooking(content: ProtocolContent): ProtocolLine[] {
	const { booking, missedDay, relaxation } = content;
	const { earliestMinute, latestMinute, weekdays, sameTimeToleranceMinutes, pauses } = booking;
	return [
		{
			key: 'clock',
			term: 'Starts',
			text: `${writeClockText(earliestMinute)} to ${writeClockText(latestMinute)}, lab time`,
			tells: pathsIn('booking', ['earliestMinute', 'latestMinute'])
		},
		{
			key: 'weekdays',
			term: 'Weekdays',
			text: weekdays.map((weekday) => weekdayNames[weekday - 1] ?? weekday).join(', '),
			tells: weekdays.map((_, index) => `booking.weekdays.${index + 1}`)
		},
		{
			key: 'same-time',
			term: 'Same time of day',
			text: `within ${sameTimeToleranceMinutes} min of the first practice visit`,
			tells: ['booking.sameTimeToleranceMinutes']
		},
		{
			key: 'pauses',
			term: 'Longer gaps',
			text:
				pauses.count === 0
					? 'none allowed'
					: `${pauses.count} of ${pauses.minHours} to ${pauses.maxHours} h a person`,
			tells: pauses.count === 0 ? ['booking.pauses.count'] : pausePaths
		},
		...describeDayMeaning(booking),
		...(missedDay ? describeMissedDay(missedDay) : []),
		...(relaxation ?? []).map(describeRelaxation)
	];
}

const dayWords: Record<string, string> = {
	'elapsed-hours':
		'hours that really pass: 24 h move the clock time by an hour over a clock change',
	'clock-time': 'the same clock time: 23 or 25 h pass over a clock change'
};

function describeDayMeaning({ dayMeaning }: ProtocolContent['booking']): ProtocolLine[] {
	if (dayMeaning === undefined) return [];
	const text = dayWords[dayMeaning] ?? dayMeaning;
	return [{ key: 'day-meaning', term: '24 h later means', text, tells: ['booking.dayMeaning'] }];
}

const missedWords: Record<string, string> = {
	'make-up': 'made up for within',
	'shift-chain': 'all later visits move; at most',
	'stop-practice': 'no more practice, retention all the same; said within'
};

function describeMissedDay({ rule, withinHours, mostMissed }: MissedDay): ProtocolLine[] {
	return [
		{
			key: 'missed',
			term: 'A missed practice day',
			text: `${missedWords[rule] ?? rule} ${withinHours} h; at most ${mostMissed} a person`,
			tells: pathsIn('missedDay', ['rule', 'withinHours', 'mostMissed'])
		}
	];
}

const relaxableWords: Record<string, { name: string; unit: string }> = {
	'gap-longest': { name: 'the longest gap', unit: 'h' },
	'gap-shortest': { name: 'the shortest gap', unit: 'h' },
	'same-time': { name: 'the same time of day', unit: 'min' },
	'clock-window': { name: 'the hours of the day', unit: 'min' },
	weekdays: { name: 'the weekdays', unit: 'days' },
	pauses: { name: 'longer gaps', unit: 'more' }
};

function describeRelaxation({ rule, by, price }: RelaxationStep, index: number): ProtocolLine {
	const { name, unit } = relaxableWords[rule] ?? { name: rule, unit: '' };
	return {
		key: `relaxation-${index + 1}`,
		term: `Gives way, ${index + 1}`,
		text: `${name} by ${by} ${unit}, at a price of ${price}`,
		tells: pathsIn(`relaxation.${index + 1}`, ['rule', 'by', 'price'])
	};
}

/** When blocks are ready and mails leave, the same in every arm. */
export function describeHours(content: ProtocolContent): ProtocolLine[] {
	const { readyLeadHours, invitationDelayHours, earliestStartHours } = content;
	if (content.visits.length < 2) return [];
	return [
		{
			key: 'lead',
			term: 'Blocks are ready',
			text: `${readyLeadHours} h before the visit, in every arm`,
			tells: ['readyLeadHours']
		},
		{
			key: 'invitations',
			term: 'Later invitations',
			text: `${invitationDelayHours} h after the baseline visit, in every arm`,
			tells: ['invitationDelayHours']
		},
		{
			key: 'earliest-start',
			term: 'Earliest start',
			text: `drawn for everybody, ${earliestStartHours.min} to ${earliestStartHours.max} h after allocation`,
			tells: pathsIn('earliestStartHours', ['min', 'max'])
		}
	];
}
